/**
 * Whittle's likelihood (Whittle 1953; complex Wishart, Goodman 1963) of the cross-spectral matrices under a sea model, with its
 * gradient and Fisher's information. ln L = −Σ_g ν_g [ln det R_g + tr(R_g⁻¹ C_g)]; score ν tr((R⁻¹CR⁻¹ − R⁻¹) ∂R);
 * information ν tr(R⁻¹ ∂_a R R⁻¹ ∂_b R) (Slepian 1954, Bangs 1971). The densities of each group are eliminated (Schur).
 */
import { multiply, scaled, traceOfProduct, turnRate, unturn } from './complexProducts.ts'
import { dopplerWaveNumber } from './dopplerDispersion.ts'
import { invertHermitian } from './hermitian.ts'
import type { SeaModel, SeaState } from './seaModel.ts'
import {
  crossCurrentAt,
  currentAt,
  depthAt,
  directionAt,
  leastLogDensity,
  noiseIndex,
  parameterCount,
  parametersPerSystem,
  priorTerm,
  spreadAt,
} from './seaModel.ts'
import { makeSpreadingNodes, spreadingNodes } from './spreading.ts'
import { complexMatrix, fillWaveMatrices, waveMatrices } from './waveMatrices.ts'
import type { ComplexMatrix } from './waveMatrices.ts'

export interface Evaluation {
  /** ln L with priors, without its constant. */
  value: number
  /** ln L of the data alone. */
  dataValue: number
  /** Each group's share of it. */
  groupValue: Float64Array
  /**
   * For each group and sensor, real and imaginary part of z_s = Σ_{k≠s} C_sk (R⁻¹)_ks: turning the sensor by a phase a changes the
   * group's ln L to −2ν Re(e^{−ia} z_s) and a constant.
   */
  turn: Float64Array
  /** R of each group, groups × sensors². */
  expected: ComplexMatrix
  /** Gradient and information of the parameters after elimination of the densities. */
  gradient: Float64Array
  information: Float64Array
  /** Each group's own share of the gradient (data alone), groups × parameters: its scatter is the honest uncertainty. */
  groupGradient: Float64Array
  /** Each group's own information of each parameter (diagonal), groups × parameters. */
  groupInformation: Float64Array
  /** What `densityStep` needs. */
  densityInverse: Float64Array
  densityGradient: Float64Array
  densityCross: Float64Array
}

export interface SeaLikelihood {
  evaluate: (state: SeaState) => Evaluation
  /** ln S change that goes with a change of the parameters. */
  densityStep: (evaluation: Evaluation, parameterStep: Float64Array) => Float64Array
}

export function seaLikelihood(model: SeaModel): SeaLikelihood {
  const { bands, x, y, systems } = model
  const m = bands.sensors
  const mm = m * m
  const groups = bands.groups
  const count = parameterCount(model)
  const noiseAt = noiseIndex(model)
  // Local directions of change in a group: S_j, then per system direction, wave number, spread, then noise and faults.
  const locals = systems * 5 + 1 + model.faults.length
  const waves = Array.from({ length: systems }, () => waveMatrices(m))
  const nodes = Array.from({ length: systems }, makeSpreadingNodes)
  const r = complexMatrix(m)
  const w = complexMatrix(m)
  const e = complexMatrix(m)
  const c = complexMatrix(m)
  const change: ComplexMatrix[] = Array.from({ length: locals }, () => complexMatrix(m))
  const product: ComplexMatrix[] = Array.from({ length: locals }, () => complexMatrix(m))
  const work = new Float64Array(4 * mm)
  const score = new Float64Array(locals)
  const fisher = new Float64Array(locals * locals)
  const wave = Array.from({ length: systems }, () => ({ k: 0, dkByCurrent: 0, dkByLogDepth: 0 }))
  const aperture = Math.max(...Array.from(x, (xi, i) => 2 * Math.hypot(xi, y[i])))
  const topFrequency = groups > 0 ? bands.frequency[groups - 1] : 0
  // Which local change each parameter acts through (current and depth both through the wave number), and by how much.
  const linkLocal = Int32Array.from({ length: count }, (_, a) => localOf(a, systems))
  const linkFactor = new Float64Array(count).fill(1)
  const block = new Float64Array(count * count)
  const inner = new Float64Array(systems * systems)
  const inverse = new Float64Array(systems * systems)
  // Still water of the depth expected: −k / C_g says how a current across tilts the wave number (first order in U / C_g).
  const still = Array.from(bands.frequency, (f) => {
    const calm = { k: 0, dkByCurrent: 0, dkByLogDepth: 0 }
    dopplerWaveNumber(2 * Math.PI * f, Math.exp(model.priors[depthAt].mean), 0, model.gravity, calm)
    return calm
  })

  const calmest = groups > 0 ? still[groups - 1].k : 0

  function evaluate(state: SeaState): Evaluation {
    const p = state.parameters
    const evaluation: Evaluation = {
      value: 0,
      dataValue: 0,
      groupValue: new Float64Array(groups),
      turn: new Float64Array(2 * groups * m),
      expected: { real: new Float64Array(groups * mm), imag: new Float64Array(groups * mm) },
      gradient: new Float64Array(count),
      information: new Float64Array(count * count),
      groupGradient: new Float64Array(groups * count),
      groupInformation: new Float64Array(groups * count),
      densityInverse: new Float64Array(groups * systems * systems),
      densityGradient: new Float64Array(groups * systems),
      densityCross: new Float64Array(groups * systems * count),
    }
    for (let j = 0; j < systems; j++) {
      const base = j * parametersPerSystem
      dopplerWaveNumber(
        2 * Math.PI * topFrequency,
        Math.exp(p[base + depthAt]),
        p[base + currentAt],
        model.gravity,
        wave[j],
      )
      const reach = Math.min(wave[j].k, 1.6 * calmest) * aperture
      spreadingNodes(Math.exp(p[base + spreadAt]), reach, nodes[j])
    }
    const noise = Math.exp(p[noiseAt])
    for (let g = 0; g < groups; g++) {
      const omega = 2 * Math.PI * bands.frequency[g]
      const nu = bands.averages[g]
      r.real.fill(0)
      r.imag.fill(0)
      for (let j = 0; j < systems; j++) {
        const base = j * parametersPerSystem
        dopplerWaveNumber(omega, Math.exp(p[base + depthAt]), p[base + currentAt], model.gravity, wave[j])
        const tilt = still[g].dkByCurrent * p[base + crossCurrentAt]
        fillWaveMatrices(x, y, p[base + directionAt], wave[j].k, tilt, nodes[j], waves[j])
        const density = Math.exp(state.logDensity[j * groups + g])
        const local = systems + 4 * j
        scaled(waves[j].gamma, density, change[j])
        scaled(waves[j].byDirection, density, change[local])
        scaled(waves[j].byWaveNumber, density, change[local + 1])
        scaled(waves[j].byLogSpread, density, change[local + 2])
        scaled(waves[j].byTilt, density, change[local + 3])
        for (let n = 0; n < mm; n++) {
          r.real[n] += change[j].real[n]
          r.imag[n] += change[j].imag[n]
        }
        linkFactor[base + currentAt] = wave[j].dkByCurrent
        linkFactor[base + depthAt] = wave[j].dkByLogDepth
        linkFactor[base + crossCurrentAt] = still[g].dkByCurrent
      }
      const noiseLocal = systems * 5
      change[noiseLocal].real.fill(0)
      change[noiseLocal].imag.fill(0)
      for (let i = 0; i < m; i++) {
        const own = noise * bands.noise[g * m + i]
        r.real[i * m + i] += own
        change[noiseLocal].real[i * m + i] = own
      }
      evaluation.expected.real.set(r.real, g * mm)
      evaluation.expected.imag.set(r.imag, g * mm)
      for (let n = 0; n < mm; n++) {
        c.real[n] = bands.real[g * mm + n]
        c.imag[n] = bands.imag[g * mm + n]
      }
      for (let f = 0; f < model.faults.length; f++) {
        const fault = model.faults[f]
        const rate = fault.kind === 'clock' ? omega : -still[g].k
        unturn(c, fault.sensor, rate * p[noiseAt + 1 + f])
        turnRate(r, fault.sensor, rate, change[noiseLocal + 1 + f])
      }
      const logDeterminant = invertHermitian(m, r.real, r.imag, w.real, w.imag, work)
      if (!(logDeterminant === logDeterminant)) {
        evaluation.value = -Infinity
        evaluation.dataValue = -Infinity
        return evaluation
      }
      multiply(m, w, c, product[0])
      let trace = 0
      for (let i = 0; i < m; i++) {
        const at = i * m + i
        trace += product[0].real[at]
        evaluation.turn[2 * (g * m + i)] = product[0].real[at] - c.real[at] * w.real[at]
        evaluation.turn[2 * (g * m + i) + 1] = -product[0].imag[at]
      }
      evaluation.groupValue[g] = -nu * (logDeterminant + trace)
      evaluation.dataValue += evaluation.groupValue[g]
      multiply(m, product[0], w, e)
      for (let n = 0; n < mm; n++) {
        e.real[n] -= w.real[n]
        e.imag[n] -= w.imag[n]
      }
      for (let a = 0; a < locals; a++) {
        score[a] = nu * traceOfProduct(m, e, change[a])
        multiply(m, w, change[a], product[a])
      }
      for (let a = 0; a < locals; a++) {
        for (let b = 0; b <= a; b++) {
          const value = nu * traceOfProduct(m, product[a], product[b])
          fisher[a * locals + b] = value
          fisher[b * locals + a] = value
        }
      }
      gather(state, evaluation, g)
    }
    evaluation.value += evaluation.dataValue
    for (let a = 0; a < count; a++) {
      const { value, slope, precision } = priorTerm(model.priors[a], p[a])
      evaluation.value += value
      evaluation.gradient[a] += slope
      evaluation.information[a * count + a] += precision
    }
    return evaluation
  }

  /** Eliminates the densities of group g and adds what is left to gradient and information of the parameters. */
  function gather(state: SeaState, evaluation: Evaluation, g: number): void {
    const innerGradient = evaluation.densityGradient
    for (let j = 0; j < systems; j++) {
      let own = score[j]
      let weight = 1e-6
      if (model.densityPrior) {
        const off = state.logDensity[j * groups + g] - model.densityPrior.mean[j * groups + g]
        const precision = 1 / model.densityPrior.sd ** 2
        own -= off * precision
        weight = precision
        evaluation.value -= 0.5 * off * off * precision
      }
      // A density that lies on its floor and would sink further is held there, not eliminated.
      if (own < 0 && state.logDensity[j * groups + g] <= leastLogDensity(bands, g) + 1e-12) weight = 1e15
      innerGradient[g * systems + j] = own
      for (let i = 0; i < systems; i++) inner[j * systems + i] = fisher[j * locals + i] + (i === j ? weight : 0)
    }
    invertSmall(systems, inner, inverse)
    evaluation.densityInverse.set(inverse, g * systems * systems)
    // One link leads from a local change to a parameter, so links and parameters are numbered alike.
    const own = g * count
    for (let a = 0; a < count; a++) {
      const factor = linkFactor[a]
      const row = linkLocal[a] * locals
      evaluation.groupGradient[own + a] += factor * score[linkLocal[a]]
      for (let j = 0; j < systems; j++)
        evaluation.densityCross[(g * systems + j) * count + a] = factor * fisher[row + j]
      for (let b = 0; b <= a; b++) block[a * count + b] = factor * linkFactor[b] * fisher[row + linkLocal[b]]
    }
    for (let i = 0; i < systems; i++) {
      for (let j = 0; j < systems; j++) {
        const weight = inverse[i * systems + j]
        const crossI = (g * systems + i) * count
        const crossJ = (g * systems + j) * count
        for (let a = 0; a < count; a++) {
          const left = evaluation.densityCross[crossI + a] * weight
          evaluation.groupGradient[own + a] -= left * innerGradient[g * systems + j]
          for (let b = 0; b <= a; b++) block[a * count + b] -= left * evaluation.densityCross[crossJ + b]
        }
      }
    }
    for (let a = 0; a < count; a++) {
      evaluation.groupInformation[own + a] = block[a * count + a]
      for (let b = 0; b <= a; b++) {
        evaluation.information[a * count + b] += block[a * count + b]
        if (b < a) evaluation.information[b * count + a] += block[a * count + b]
      }
    }
    for (let a = 0; a < count; a++) evaluation.gradient[a] += evaluation.groupGradient[g * count + a]
  }

  function densityStep(evaluation: Evaluation, parameterStep: Float64Array): Float64Array {
    const step = new Float64Array(systems * groups)
    for (let g = 0; g < groups; g++) {
      for (let i = 0; i < systems; i++) {
        for (let j = 0; j < systems; j++) {
          let left = evaluation.densityGradient[g * systems + j]
          for (let a = 0; a < count; a++)
            left -= evaluation.densityCross[(g * systems + j) * count + a] * parameterStep[a]
          step[i * groups + g] += evaluation.densityInverse[(g * systems + i) * systems + j] * left
        }
      }
    }
    return step
  }

  return { evaluate, densityStep }
}

/** S_j come first; then direction, wave number and spread of each system; then noise and faults, as in the parameters. */
function localOf(parameter: number, systems: number): number {
  const system = Math.floor(parameter / parametersPerSystem)
  if (system >= systems) return systems * 5 + parameter - systems * parametersPerSystem
  return systems + 4 * system + [0, 1, 1, 2, 3][parameter % parametersPerSystem]
}

/** Inverse of a symmetric 1×1, 2×2 or 3×3 matrix into `out`. */
function invertSmall(n: number, a: Float64Array, out: Float64Array): void {
  if (n === 1) {
    out[0] = 1 / a[0]
    return
  }
  if (n === 2) {
    const determinant = a[0] * a[3] - a[1] * a[2]
    out[0] = a[3] / determinant
    out[1] = -a[1] / determinant
    out[2] = out[1]
    out[3] = a[0] / determinant
    return
  }
  const c00 = a[4] * a[8] - a[5] * a[7]
  const c01 = a[5] * a[6] - a[3] * a[8]
  const c02 = a[3] * a[7] - a[4] * a[6]
  const determinant = a[0] * c00 + a[1] * c01 + a[2] * c02
  out[0] = c00 / determinant
  out[1] = out[3] = c01 / determinant
  out[2] = out[6] = c02 / determinant
  out[4] = (a[0] * a[8] - a[2] * a[6]) / determinant
  out[5] = out[7] = (a[2] * a[3] - a[0] * a[5]) / determinant
  out[8] = (a[0] * a[4] - a[1] * a[3]) / determinant
}

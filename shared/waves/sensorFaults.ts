/**
 * A sensor whose clock or position is wrong does not fit the plane waves that the others agree on. First a score test of every sensor
 * beside the fit (Rao 1948), cheap and run always; only when one is far out, fits that let each sensor in turn be wrong, started
 * from the array without it. The likeliest culprit is named.
 */
import type { BandMatrices } from './bandMatrices.ts'
import { noiseDensity, selectSensors } from './bandMatrices.ts'
import { phaseSpeed, waveNumber } from './dispersion.ts'
import { fitSea, quick } from './seaFit.ts'
import type { SeaFit } from './seaFit.ts'
import { seaLikelihood } from './seaLikelihood.ts'
import type { Evaluation } from './seaLikelihood.ts'
import { depthAt, noiseIndex, parameterCount } from './seaModel.ts'
import type { PhaseFault, SeaModel, SeaState } from './seaModel.ts'
import { invertSymmetric } from './symmetric.ts'

export interface SensorSuspicion {
  /** Clock offset that would explain the sensor's phases, s, with one standard deviation. */
  offset: number
  sd: number
}

export interface SensorFault {
  /** In the frame's order. */
  sensor: number
  kind: 'clock' | 'path'
  /** s for a clock, m along the waves for a path. */
  value: number
  sd: number
  /** ln L gained over a faultless array, and over the next likely culprit. */
  gain: number
  lead: number
  /** Share of the energy that the other sensors alone leave unexplained. */
  unexplained: number
}

/** So many standard deviations make a suspicion worth the costly look. */
const suspicious = 3.5
/** A fault is named when it gains so much ln L, stands so many deviations off zero and leads the next culprit by so much. */
const leastGain = 14
const leastDeviations = 4
const leastLead = 3
/** Share of the energy, beyond the noise floor, that a fit may leave unexplained. */
export const greatestUnexplained = 0.05

/** Share of a band's energy that goes to noise above its floor: `logNoise` is ln of the noise fitted over that floor. */
export function unexplainedShare(bands: BandMatrices, logNoise: number): number {
  const floor = noiseDensity(bands)
  let energy = 0
  let noise = 0
  for (let g = 0; g < bands.groups; g++) {
    energy += bands.density[g] * bands.width[g]
    noise += floor[g] * bands.width[g]
  }
  return energy > 0 ? ((Math.exp(logNoise) - 1) * noise) / energy : 0
}

/** Score test of every sensor's clock at a fitted sea. */
export function suspicions(fit: SeaFit): SensorSuspicion[] {
  const { model } = fit
  const sensors = model.bands.sensors
  const widened = withFaults(
    model,
    Array.from({ length: sensors }, (_, sensor) => ({ kind: 'clock' as const, sensor })),
  )
  const own = parameterCount(model)
  const count = parameterCount(widened)
  const parameters = new Float64Array(count)
  parameters.set(fit.state.parameters)
  const evaluation = seaLikelihood(widened).evaluate({ parameters, logDensity: fit.state.logDensity })
  const { information, gradient } = evaluation
  return Array.from({ length: sensors }, (_, sensor) => {
    const at = own + sensor
    const cross = information.slice(at * count, at * count + own)
    const weights = new Float64Array(own)
    for (let a = 0; a < own; a++) for (let b = 0; b < own; b++) weights[a] += fit.covariance[a * own + b] * cross[b]
    let effective = information[at * count + at]
    let score = gradient[at]
    for (let a = 0; a < own; a++) {
      effective -= weights[a] * cross[a]
      score -= weights[a] * gradient[a]
    }
    if (!(effective > 0)) return { offset: 0, sd: Infinity }
    return { offset: score / effective, sd: 1 / Math.sqrt(effective) }
  })
}

/**
 * The sensor that is wrong, or null. `usualSd[i]` is the time error (s) that survey and clock of sensor i may have. `ambiguous` is true
 * when something is wrong but no one sensor leads.
 */
export function findFault(
  fit: SeaFit,
  usualSd: readonly number[],
  period: number,
): { fault: SensorFault | null; ambiguous: boolean } {
  const none = { fault: null, ambiguous: false }
  const { model } = fit
  const sensors = model.bands.sensors
  if (sensors < 4) return none
  const off = suspicions(fit).map((s, i) => Math.abs(s.offset) / Math.hypot(s.sd, usualSd[i]))
  if (Math.max(...off) < suspicious) return none
  const candidates = Array.from({ length: sensors }, (_, sensor) => bestFault(fit, sensor, period))
    .flatMap((fault) => (fault ? [fault] : []))
    .sort((a, b) => b.gain - a.gain)
  if (candidates.length === 0) return none
  const [best, second] = candidates
  const lead = second ? best.gain - second.gain : best.gain
  const usual = best.kind === 'clock' ? usualSd[best.sensor] : usualSd[best.sensor] * 8
  if (best.gain < leastGain || Math.abs(best.value) < leastDeviations * Math.hypot(best.sd, usual)) return none
  // A sensor is blamed only when the sea is understood without its fault; else it is the sea that does not fit.
  if (best.unexplained > greatestUnexplained) return none
  if (lead < leastLead) return { fault: null, ambiguous: true }
  return { fault: { ...best, lead }, ambiguous: false }
}

function withFaults(model: SeaModel, faults: PhaseFault[]): SeaModel {
  return { ...model, faults, priors: [...model.priors, ...faults.map(() => ({ mean: 0, sd: 1e3 }))] }
}

/** Offsets tried on both sides of zero, as a share of the period (clock) or of the wave's length (path). */
const furthest = 0.45
const triesASide = 18

/** The value of one fault that fits best while the sea stays as the others see it, and the ln L it gives but for a constant. */
function scanFault(evaluation: Evaluation, model: SeaModel, sensor: number, kind: PhaseFault['kind'], period: number) {
  const { bands } = model
  const depth = Math.exp(model.priors[depthAt].mean)
  const rates = Array.from(bands.frequency, (f) =>
    kind === 'clock' ? 2 * Math.PI * f : -waveNumber(2 * Math.PI * f, depth, model.gravity),
  )
  const unit = kind === 'clock' ? period : period * phaseSpeed(period, depth, model.gravity)
  let best = { value: 0, likelihood: -Infinity }
  for (let n = -triesASide; n <= triesASide; n++) {
    const value = (furthest * unit * n) / triesASide
    let likelihood = 0
    for (let g = 0; g < bands.groups; g++) {
      const at = 2 * (g * bands.sensors + sensor)
      const turned =
        Math.cos(rates[g] * value) * evaluation.turn[at] + Math.sin(rates[g] * value) * evaluation.turn[at + 1]
      likelihood -= 2 * bands.averages[g] * turned
    }
    if (likelihood > best.likelihood) best = { value, likelihood }
  }
  return { ...best, kind }
}

/** Fit with one sensor allowed to be wrong, from the sea that the others see; null when the others do not span the plane. */
function bestFault(fit: SeaFit, sensor: number, period: number): SensorFault | null {
  const start = withoutSensor(fit, sensor)
  if (!start) return null
  const evaluation = seaLikelihood(fit.model).evaluate(start)
  if (!Number.isFinite(evaluation.value)) return null
  const clock = scanFault(evaluation, fit.model, sensor, 'clock', period)
  const path = scanFault(evaluation, fit.model, sensor, 'path', period)
  return fitFault(fit, start, sensor, path.likelihood > clock.likelihood ? path : clock)
}

function fitFault(
  fit: SeaFit,
  start: SeaState,
  sensor: number,
  scanned: { kind: PhaseFault['kind']; value: number },
): SensorFault | null {
  const model = withFaults(fit.model, [{ kind: scanned.kind, sensor }])
  const count = parameterCount(model)
  const at = noiseIndex(model) + 1
  const parameters = new Float64Array(count)
  parameters.set(start.parameters)
  parameters[at] = scanned.value
  const fitted = fitSea(model, { parameters, logDensity: start.logDensity }, { ...quick, maxIterations: 12 })
  if (!fitted) return null
  return {
    sensor,
    kind: scanned.kind,
    value: fitted.state.parameters[at],
    sd: Math.sqrt(fitted.covariance[at * count + at]),
    gain: fitted.evaluation.value - fit.evaluation.value,
    lead: 0,
    unexplained: unexplainedShare(model.bands, start.parameters[noiseIndex(model)]),
  }
}

/** Parameters that the other sensors alone would give. */
function withoutSensor(fit: SeaFit, sensor: number): SeaState | null {
  const { model, state } = fit
  const kept = Array.from({ length: model.bands.sensors }, (_, i) => i).filter((i) => i !== sensor)
  const bands: BandMatrices = selectSensors(model.bands, kept)
  const part = {
    ...model,
    bands,
    x: Float64Array.from(kept, (i) => model.x[i]),
    y: Float64Array.from(kept, (i) => model.y[i]),
  }
  if (!invertSymmetric(2, planeOf(part.x, part.y))) return null
  return fitSea(part, state, quick)?.state ?? null
}

function planeOf(x: Float64Array, y: Float64Array): number[] {
  const meanX = x.reduce((sum, v) => sum + v, 0) / x.length
  const meanY = y.reduce((sum, v) => sum + v, 0) / y.length
  let xx = 0
  let xy = 0
  let yy = 0
  for (let i = 0; i < x.length; i++) {
    xx += (x[i] - meanX) ** 2
    xy += (x[i] - meanX) * (y[i] - meanY)
    yy += (y[i] - meanY) ** 2
  }
  return [xx, xy, xy, yy * (1 - 1e-6)]
}

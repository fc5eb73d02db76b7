/**
 * Score test for one more train beside a fit (Rao 1948): the slope of ln L where a train from a direction is let in, with energy
 * over some stretch of frequencies. A swell and a wind sea whose peaks run together look like one wide train in the spectrum; what the
 * fit leaves of the cross-spectra tells them apart.
 */
import { multiply } from './complexProducts.ts'
import { waveNumber } from './dispersion.ts'
import { invertHermitian } from './hermitian.ts'
import type { SeaFit } from './seaFit.ts'
import { depthAt } from './seaModel.ts'
import { complexMatrix } from './waveMatrices.ts'
import type { ComplexMatrix } from './waveMatrices.ts'

export interface HiddenTrain {
  /** Standard deviations of the score. */
  score: number
  /** Radians of travel in the frame. */
  direction: number
  /** Groups of the fit: [from, to). */
  from: number
  to: number
}

const directions = 36
/** Half width over which directions are gathered, so that a spread train is seen as one. */
const gathered = 2
/** A train covers at least so many groups. */
const fewestGroups = 4
/** Noise granted to each sensor beside the fit's, share of the density: a train that adds less to it counts for nothing. */
const granted = 0.02

/** The most likely further train, whatever its score. */
export function hiddenTrain(fit: SeaFit): HiddenTrain {
  const { bands, x, y, gravity, priors } = fit.model
  const m = bands.sensors
  const depth = Math.exp(priors[depthAt].mean)
  const slope = new Float64Array(bands.groups * directions)
  const power = new Float64Array(bands.groups * directions)
  const re = new Float64Array(m)
  const im = new Float64Array(m)
  const left = complexMatrix(m)
  const precision = complexMatrix(m)
  for (let g = 0; g < bands.groups; g++) {
    whatIsLeft(fit, g, precision, left)
    const k = waveNumber(2 * Math.PI * bands.frequency[g], depth, gravity)
    const weight = bands.density[g]
    for (let n = 0; n < directions; n++) {
      const angle = (2 * Math.PI * n) / directions
      for (let i = 0; i < m; i++) {
        const phase = k * (x[i] * Math.cos(angle) + y[i] * Math.sin(angle))
        re[i] = Math.cos(phase)
        im[i] = -Math.sin(phase)
      }
      const at = g * directions + n
      slope[at] = bands.averages[g] * weight * form(left, m, re, im)
      power[at] = Math.sqrt(bands.averages[g]) * weight * form(precision, m, re, im)
    }
  }
  let best: HiddenTrain = { score: 0, direction: 0, from: 0, to: 0 }
  for (let n = 0; n < directions; n++) {
    for (let from = 0; from + fewestGroups <= bands.groups; from++) {
      let sum = 0
      let variance = 0
      for (let g = from; g < bands.groups; g++) {
        let own = 0
        let spread = 0
        for (let d = -gathered; d <= gathered; d++) {
          const at = g * directions + ((n + d + directions) % directions)
          own += slope[at]
          spread += power[at]
        }
        sum += own
        variance += spread * spread
        if (g + 1 - from < fewestGroups) continue
        const score = sum / Math.sqrt(variance)
        if (score > best.score) best = { score, direction: (2 * Math.PI * n) / directions, from, to: g + 1 }
      }
    }
  }
  return best
}

/** W = (R + granted noise)⁻¹ and W(C − R − granted noise)W of one group. */
function whatIsLeft(fit: SeaFit, group: number, precision: ComplexMatrix, left: ComplexMatrix): void {
  const { bands } = fit.model
  const m = bands.sensors
  const at = group * m * m
  const { expected } = fit.evaluation
  const widened = { real: expected.real.slice(at, at + m * m), imag: expected.imag.slice(at, at + m * m) }
  for (let i = 0; i < m; i++) widened.real[i * m + i] += granted * bands.density[group]
  invertHermitian(m, widened.real, widened.imag, precision.real, precision.imag, new Float64Array(4 * m * m))
  const beyond = complexMatrix(m)
  for (let n = 0; n < m * m; n++) {
    beyond.real[n] = bands.real[at + n] - widened.real[n]
    beyond.imag[n] = bands.imag[at + n] - widened.imag[n]
  }
  const half = complexMatrix(m)
  multiply(m, precision, beyond, half)
  multiply(m, half, precision, left)
}

/** aᴴ M a of a Hermitian matrix with a = re + i im. */
function form(matrix: ComplexMatrix, m: number, re: Float64Array, im: Float64Array): number {
  let sum = 0
  for (let i = 0; i < m; i++) {
    sum += matrix.real[i * m + i]
    for (let j = 0; j < i; j++) {
      const real = re[i] * re[j] + im[i] * im[j]
      const imag = re[i] * im[j] - im[i] * re[j]
      sum += 2 * (matrix.real[i * m + j] * real - matrix.imag[i * m + j] * imag)
    }
  }
  return sum
}

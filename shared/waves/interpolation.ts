/**
 * Best linear interpolation of a stationary record from its own autocovariance (Wiener 1949): what the samples around a run of one or
 * more say it should be. With P the inverse covariance of a stretch z, the residual of a block B is P_BB⁻¹(Pz)_B, its covariance
 * P_BB⁻¹.
 */
import { invertSymmetric } from './symmetric.ts'

export interface RunInterpolation {
  /** Samples in the run, and neighbours on either side. */
  length: number
  side: number
  /** Rows of P that belong to the run, length × (2 side + length). */
  rows: Float64Array
  /** P_BB⁻¹, length × length. */
  covariance: Float64Array
}

/** White noise added to the autocovariance, share of the variance: no sea is smoother than that. */
const ridge = 1e-4

/**
 * Autocovariance for lags 0 to `lags`, each sample at most `clip` from zero, so that no wild sample teaches its own shape. Missing
 * samples (NaN) are passed over.
 */
export function autocovariance(series: Float64Array, clip: number, lags: number): Float64Array {
  const n = series.length
  const clipped = new Float64Array(n)
  let present = 0
  for (let i = 0; i < n; i++) {
    if (series[i] !== series[i]) continue
    clipped[i] = Math.max(-clip, Math.min(clip, series[i]))
    present++
  }
  // Divided by one number at all lags, so that the matrix made of it stays positive definite.
  const covariance = new Float64Array(lags + 1)
  for (let lag = 0; lag <= lags; lag++) {
    let sum = 0
    for (let i = lag; i < n; i++) sum += clipped[i] * clipped[i - lag]
    covariance[lag] = present > 0 ? sum / present : 0
  }
  covariance[0] *= 1 + ridge
  return covariance
}

/** Null for a record without variance. */
export function runInterpolation(covariance: Float64Array, side: number, length: number): RunInterpolation | null {
  const n = 2 * side + length
  const toeplitz = Float64Array.from({ length: n * n }, (_, at) => covariance[Math.abs(Math.floor(at / n) - (at % n))])
  const precision = invertSymmetric(n, toeplitz)
  if (!precision) return null
  const rows = precision.slice(side * n, (side + length) * n)
  const own = Float64Array.from(
    { length: length * length },
    (_, at) => rows[Math.floor(at / length) * n + side + (at % length)],
  )
  const inverse = invertSymmetric(length, own)
  return inverse && { length, side, rows, covariance: inverse }
}

/** (Pz)_B of the run that begins at `from`, into `out`; NaN where a neighbour is missing or outside the record. */
export function runScore(run: RunInterpolation, series: Float64Array, from: number, out: Float64Array): void {
  const n = 2 * run.side + run.length
  const first = from - run.side
  for (let row = 0; row < run.length; row++) {
    let sum = first < 0 || first + n > series.length ? NaN : 0
    if (sum === 0) for (let k = 0; k < n; k++) sum += run.rows[row * n + k] * series[first + k]
    out[row] = sum
  }
}

/**
 * Spikes: runs of one to three samples that the samples around them cannot explain. A run is held against its best linear
 * interpolation: the residual of a Gaussian sea is then Gaussian at every sample rate and period, unlike the distance from a median of
 * neighbours, so a limit in standard deviations means what it says.
 */
import { bridgeGaps } from './bridgeGaps.ts'
import { detrend } from './detrend.ts'
import { autocovariance, runInterpolation, runScore } from './interpolation.ts'
import type { RunInterpolation } from './interpolation.ts'
import { quantilesOf, robustSpread } from './robust.ts'
import { invertSymmetric } from './symmetric.ts'

/** Longest run looked for, samples. */
const longestSpike = 3
/** Neighbours on either side: so many seconds, within so many samples. */
const neighbourSeconds = 3
const fewestNeighbours = 6
const mostNeighbours = 16
/**
 * A spike stands off its interpolation by at least so many standard deviations of the record, three eighths of H_m0: the crests of steep
 * real seas are sharper than a Gaussian sea's, but not by that much.
 */
const leastSize = 1.5
const mostPasses = 6
/** How often the record is looked at in a pass, and the limit from which a run is suspected in all but the last look. */
const looks = 3
const suspectSigmas = 4
/** Farther from the middle a sample does not count fully in the autocovariance, standard deviations. */
const clipSigmas = 4
/** Median and 80 % point of χ with 1, 2 and 3 degrees of freedom (Abramowitz & Stegun 1964, table 26.8). */
const chiMedian = [0.6745, 1.1774, 1.5382]
const chiTail = [1.2816, 1.7941, 2.1544]

/** Makes spikes missing (NaN) in `series`; returns how many samples. */
export function dropSpikes(series: Float64Array, sampleRate: number, sigmas: number): number {
  const flat = detrend(series)
  const spread = robustSpread(flat)
  const side = Math.min(mostNeighbours, Math.max(fewestNeighbours, Math.round(neighbourSeconds * sampleRate)))
  if (!(spread > 0) || flat.length < 8 * side) return 0
  let dropped = 0
  for (let pass = 0; pass < mostPasses; pass++) {
    const found = findRuns(flat, spread, side, sigmas)
    for (const { from, length } of found) {
      for (let i = from; i < from + length; i++) flat[i] = series[i] = NaN
      dropped += length
    }
    if (found.length === 0) break
  }
  return dropped
}

interface Run {
  from: number
  length: number
  /** ln L that taking the run for a spike gains, less the price of its samples (Schwarz 1978). */
  gain: number
}

function findRuns(flat: Float64Array, spread: number, side: number, sigmas: number): Run[] {
  let covariance = autocovariance(flat, clipSigmas * spread, 3 * side)
  let candidates: Run[] = []
  // Spikes are white noise to the autocovariance and blunt the interpolation: what is suspected is left out of it and looked at anew.
  for (let look = 0; look < looks; look++) {
    const last = look === looks - 1
    const filled = fillGaps(flat, covariance, side)
    const one = runInterpolation(covariance, side, 1)
    if (!one) return []
    const whitened = whiten(one, flat, filled)
    candidates = []
    for (let length = 1; length <= longestSpike; length++)
      candidates.push(
        ...standingOut(one, length, whitened, last ? leastSize * spread : 0, last ? sigmas : suspectSigmas),
      )
    if (last || candidates.length === 0) break
    const trusted = flat.slice()
    for (const { from, length } of candidates) trusted.fill(NaN, from, from + length)
    covariance = autocovariance(trusted, clipSigmas * spread, 3 * side)
  }
  candidates.sort((a, b) => b.gain - a.gain || a.from - b.from)
  // One run spoils the interpolation of those about it; they are looked at again in the next pass.
  const chosen: Run[] = []
  for (const candidate of candidates)
    if (chosen.every((other) => Math.abs(other.from - candidate.from) > side + longestSpike)) chosen.push(candidate)
  return chosen
}

/** (Pz) at every sample; NaN at missing ones and where neighbours are. */
function whiten(one: RunInterpolation, flat: Float64Array, filled: Float64Array): Float64Array {
  const whitened = new Float64Array(flat.length).fill(NaN)
  const score = new Float64Array(1)
  for (let i = 0; i < flat.length; i++) {
    if (flat[i] !== flat[i]) continue
    runScore(one, filled, i, score)
    whitened[i] = score[0]
  }
  return whitened
}

/**
 * Runs of one length whose residual P_BB⁻¹(Pz)_B is beyond the limit. Far from its ends P is the same from row to row, so one row
 * serves all samples of a run.
 */
function standingOut(
  { rows, side }: RunInterpolation,
  length: number,
  whitened: Float64Array,
  leastResidual: number,
  sigmas: number,
): Run[] {
  const own = Float64Array.from(
    { length: length * length },
    (_, at) => rows[side + Math.abs(Math.floor(at / length) - (at % length))],
  )
  const covariance = invertSymmetric(length, own)
  if (!covariance) return []
  const scores = new Float64Array(whitened.length).fill(NaN)
  const sizes = new Float64Array(whitened.length)
  for (let from = 0; from + length <= whitened.length; from++) {
    let square = 0
    let largest = 0
    for (let i = 0; i < length; i++) {
      let residual = 0
      for (let j = 0; j < length; j++) residual += covariance[i * length + j] * whitened[from + j]
      square += residual * whitened[from + i]
      largest = Math.max(largest, Math.abs(residual))
    }
    scores[from] = Math.sqrt(square)
    sizes[from] = largest
  }
  // The residual's own tail sets the scale where it is heavier than that of a Gaussian sea.
  const n = length - 1
  const [median, tail] = quantilesOf(scores, [0.5, 0.8])
  const scale = Math.max(median / chiMedian[n], tail / chiTail[n])
  const limit = scale * sigmas
  const price = n * Math.log(scores.length)
  const found: Run[] = []
  for (let from = 0; from < scores.length; from++)
    if (scores[from] > limit && sizes[from] > leastResidual)
      found.push({ from, length, gain: 0.5 * (scores[from] / scale) ** 2 - price })
  return found
}

/** Short gaps filled by their own interpolation, so that they neither accuse nor hide what is beside them; long ones stay missing. */
function fillGaps(flat: Float64Array, covariance: Float64Array, side: number): Float64Array {
  const filled = flat.slice()
  const unbridged = bridgeGaps(filled, side)
  for (let i = 0; i < filled.length; i++) if (unbridged[i]) filled[i] = NaN
  const runs = new Map<number, RunInterpolation | null>()
  for (let from = 0; from < flat.length; from++) {
    if (flat[from] === flat[from] || filled[from] !== filled[from]) continue
    let length = 1
    while (flat[from + length] !== flat[from + length]) length++
    if (!runs.has(length)) runs.set(length, runInterpolation(covariance, side, length))
    const run = runs.get(length)
    if (run) takeResidual(run, filled, from)
    from += length
  }
  return filled
}

function takeResidual(run: RunInterpolation, filled: Float64Array, from: number): void {
  const score = new Float64Array(run.length)
  runScore(run, filled, from, score)
  if (score[0] !== score[0]) return
  for (let i = 0; i < run.length; i++)
    for (let j = 0; j < run.length; j++) filled[from + i] -= run.covariance[i * run.length + j] * score[j]
}

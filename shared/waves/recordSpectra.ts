/**
 * The whole record seen at fine frequencies and gathered into narrow groups: the cross-spectral matrix that the fit works on.
 * One taper over the whole window instead of short segments, because segments blur the steep front of a swell spectrum and
 * lose coherence by the lag itself (Carter 1987); neighbouring frequencies of a stationary record are independent.
 */
import { fourierPlan, powerOfTwoFrom } from './fourier.ts'

/** Share of the record tapered by a cosine at each end (Tukey 1967). */
export const taperShare = 0.04

export interface FineSpectra {
  /** Distance of the bins, Hz. */
  step: number
  /** Frequency of the first bin, Hz. */
  first: number
  count: number
  /** One array of interleaved real and imaginary parts a series, scaled so that |X|² is a one-sided density in unit²/Hz. */
  series: Float64Array[]
  /** Mean square of each series over that of the tapered one: what the taper hid of the energy. */
  energyFactor: number[]
  /** Bins for one over the length of the record. */
  padding: number
  /** Independent averages that one bin stands for (below 1 for a zero-padded record). */
  averagesPerBin: number
  /** What the transform of the tapered record was multiplied by. */
  scale: number
}

/**
 * Transforms series of one length. `covered` is the share of samples that carry data (others are zero); densities are scaled
 * by it. Cost: one transform a series.
 */
export function fineSpectra(
  series: readonly Float64Array[],
  sampleRate: number,
  from: number,
  to: number,
  covered = 1,
): FineSpectra {
  const length = series[0]?.length ?? 0
  const size = powerOfTwoFrom(length)
  const plan = fourierPlan(size)
  const step = sampleRate / size
  const firstBin = Math.max(1, Math.ceil(from / step))
  const lastBin = Math.min(size / 2 - 1, Math.floor(to / step))
  const count = Math.max(0, lastBin - firstBin + 1)
  const taper = cosineTaper(length)
  let power = 0
  let fourth = 0
  for (let i = 0; i < length; i++) {
    power += taper[i] ** 2
    fourth += taper[i] ** 4
  }
  const scale = Math.sqrt(2 / (sampleRate * power * covered))
  const energyFactor: number[] = []
  const spectra = series.map((one) => {
    let whole = 0
    let tapered = 0
    for (let i = 0; i < length; i++) {
      const value = one[i] * taper[i]
      plan.input[i] = value
      whole += one[i] * one[i]
      tapered += value * value
    }
    energyFactor.push(tapered > 0 ? whole / length / (tapered / power) : 1)
    plan.input.fill(0, length)
    plan.run()
    const kept = new Float64Array(2 * count)
    for (let n = 0; n < 2 * count; n++) kept[n] = plan.output[2 * firstBin + n] * scale
    return kept
  })
  // Bins within one taper's bandwidth say the same: Σw²² / (N Σw⁴) of a bin of the unpadded record.
  const averagesPerBin = ((power * power) / (length * fourth)) * (length / size) * covered
  return {
    step,
    first: firstBin * step,
    count,
    series: spectra,
    energyFactor,
    padding: size / length,
    averagesPerBin,
    scale,
  }
}

const tapers = new Map<number, Float64Array>()

function cosineTaper(length: number): Float64Array {
  const known = tapers.get(length)
  if (known) return known
  const taper = new Float64Array(length).fill(1)
  const edge = Math.floor(taperShare * length)
  for (let i = 0; i < edge; i++) {
    const value = 0.5 - 0.5 * Math.cos((Math.PI * (i + 0.5)) / edge)
    taper[i] = value
    taper[length - 1 - i] = value
  }
  tapers.set(length, taper)
  return taper
}

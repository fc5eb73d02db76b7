/**
 * Welch's estimate (Welch 1967): Hann taper, 50 % overlap, each segment freed of its straight line. One-sided densities.
 * Sign: S_ij = ⟨X_i* X_j⟩ with X(f) = Σ x exp(−i2πft), so a series j that lags i by τ has arg S_ij = −2πfτ.
 */
import { detrend } from './detrend.ts'
import { fourierPlan } from './fourier.ts'

export interface SegmentSpectra {
  /** Samples a segment, a power of two. */
  length: number
  /** Hz between bins. */
  step: number
  segments: number
  /** [segment][series] interleaved real and imaginary parts of bins 0 … length/2, scaled to a one-sided density. */
  parts: Float64Array[][]
}

/**
 * Cuts the series into overlapping segments and transforms them. Errors: RangeError when a segment is longer than the record or
 * is no power of two.
 */
export function segmentSpectra(series: readonly Float64Array[], sampleRate: number, length: number): SegmentSpectra {
  const total = series[0]?.length ?? 0
  if (length > total || (length & (length - 1)) !== 0)
    throw new RangeError(`no segment of ${length} in ${total} samples`)
  const plan = fourierPlan(length)
  const hop = length / 2
  const segments = Math.floor((total - length) / hop) + 1
  const window = Float64Array.from({ length }, (_, i) => 0.5 - 0.5 * Math.cos((2 * Math.PI * i) / length))
  const power = window.reduce((sum, w) => sum + w * w, 0)
  const scale = Math.sqrt(1 / (sampleRate * power))
  const parts: Float64Array[][] = []
  for (let segment = 0; segment < segments; segment++) {
    const start = segment * hop
    parts.push(
      series.map((one) => {
        const flat = detrend(one.subarray(start, start + length))
        for (let i = 0; i < length; i++) plan.input[i] = flat[i] * window[i]
        plan.run()
        const kept = new Float64Array(length + 2)
        for (let bin = 0; bin <= length / 2; bin++) {
          const twice = bin === 0 || bin === length / 2 ? scale : scale * Math.SQRT2
          kept[2 * bin] = plan.output[2 * bin] * twice
          kept[2 * bin + 1] = plan.output[2 * bin + 1] * twice
        }
        return kept
      }),
    )
  }
  return { length, step: sampleRate / length, segments, parts }
}

/** One-sided density of one series, unit²/Hz, bins 0 … length/2. */
export function welchDensity(spectra: SegmentSpectra, index: number): Float64Array {
  const density = new Float64Array(spectra.length / 2 + 1)
  for (const parts of spectra.parts) {
    const x = parts[index]
    for (let bin = 0; bin < density.length; bin++) density[bin] += x[2 * bin] ** 2 + x[2 * bin + 1] ** 2
  }
  for (let bin = 0; bin < density.length; bin++) density[bin] /= spectra.segments
  return density
}

/**
 * Independent averages behind one bin: K / (1 + 2 (K−1)/K ρ²) with ρ = 1/6 for a Hann taper at half overlap (Welch 1967).
 * Degrees of freedom are twice that.
 */
export function independentAverages(segments: number): number {
  return segments / (1 + (2 * ((segments - 1) / segments)) / 36)
}

/** Cross-spectrum of two series from Welch's segments; see `spectrum.ts` for scale and sign. */
import type { SegmentSpectra } from './spectrum.ts'

/** S_ij = ⟨X_i* X_j⟩, interleaved real and imaginary parts, bins 0 … length/2. */
export function crossSpectrum(spectra: SegmentSpectra, i: number, j: number): Float64Array {
  const cross = new Float64Array(spectra.length + 2)
  for (const parts of spectra.parts) {
    const x = parts[i]
    const y = parts[j]
    for (let n = 0; n < cross.length; n += 2) {
      cross[n] += x[n] * y[n] + x[n + 1] * y[n + 1]
      cross[n + 1] += x[n] * y[n + 1] - x[n + 1] * y[n]
    }
  }
  for (let n = 0; n < cross.length; n++) cross[n] /= spectra.segments
  return cross
}

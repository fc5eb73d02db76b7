/**
 * Lag of each pair over a band: the weighted slope of the cross-spectral phase through the origin,
 * τ = −Σ w ω φ / Σ w ω² with w = 2n γ²/(1−γ²) (Bendat & Piersol, Random Data, ch. 9; Hannan & Thomson 1973).
 */
import type { BandMatrices } from './bandMatrices.ts'
import { squaredCoherence, unbiasedCoherence } from './coherence.ts'

export interface BandLag {
  i: number
  j: number
  lag: number
  lagSd: number | null
  /** Energy-weighted squared coherence over the band, 0 to 1. */
  coherence: number
}

/**
 * All pairs i < j. `expected(i, j)` is the lag by which phases are unwrapped. Coherence is averaged over the whole
 * band, aligned by that lag, because a single narrow group has too few averages to tell.
 */
export function bandLags(bands: BandMatrices, expected: (i: number, j: number) => number): BandLag[] {
  const m = bands.sensors
  const lags: BandLag[] = []
  for (let i = 0; i < m; i++) {
    for (let j = i + 1; j < m; j++) {
      const near = expected(i, j)
      let crossReal = 0
      let crossImag = 0
      let ii = 0
      let jj = 0
      let slopeSum = 0
      let weightSum = 0
      let averages = 0
      for (let g = 0; g < bands.groups; g++) {
        const omega = 2 * Math.PI * bands.frequency[g]
        const at = g * m * m
        // ⟨X_i* X_j⟩ is C_ji; its phase is −ωτ, turned back here by the lag expected.
        const real = bands.real[at + j * m + i]
        const imag = bands.imag[at + j * m + i]
        const cos = Math.cos(omega * near)
        const sin = Math.sin(omega * near)
        const alignedReal = real * cos - imag * sin
        const alignedImag = real * sin + imag * cos
        const weight = bands.averages[g]
        crossReal += weight * alignedReal
        crossImag += weight * alignedImag
        ii += weight * bands.real[at + i * m + i]
        jj += weight * bands.real[at + j * m + j]
        slopeSum -= weight * omega * alignedImag
        weightSum += weight * omega * omega * alignedReal
        averages += weight
      }
      const coherence = unbiasedCoherence(squaredCoherence(crossReal, crossImag, ii, jj), averages)
      // Small angles: Im ≈ −|S| ω (τ − near), so the slope is a ratio of moments; one more turn would change nothing above 1e-3.
      const off = weightSum > 0 ? slopeSum / weightSum : 0
      const certainty = (2 * averages * coherence) / Math.max(1e-9, 1 - coherence)
      const omegaSquared = crossReal > 0 ? weightSum / crossReal : 0
      lags.push({
        i,
        j,
        lag: near + off,
        lagSd: certainty > 0 && omegaSquared > 0 ? 1 / Math.sqrt(certainty * omegaSquared) : null,
        coherence,
      })
    }
  }
  return lags
}

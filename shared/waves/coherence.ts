/** How much two series share at a frequency, and how sure a phase is. */

/** Magnitude-squared coherence |S_xy|² / (S_xx S_yy), 0 to 1; 0 where there is no energy. */
export function squaredCoherence(real: number, imaginary: number, xx: number, yy: number): number {
  const energy = xx * yy
  return energy > 0 ? Math.min(1, (real * real + imaginary * imaginary) / energy) : 0
}

/** Coherence that unrelated noise exceeds with probability `alpha` over `averages` independent averages (Carter et al. 1973). */
export function criticalCoherence(averages: number, alpha = 0.01): number {
  return averages > 1 ? 1 - Math.pow(alpha, 1 / (averages - 1)) : 1
}

/** Standard deviation of a cross-spectral phase, rad (Bendat & Piersol, Random Data, table 9.6). Infinite without coherence. */
export function phaseDeviation(coherence: number, averages: number): number {
  return coherence > 0 ? Math.sqrt((1 - coherence) / (2 * averages * coherence)) : Infinity
}

/** Takes the bias (1−γ²)²/n of a small squared coherence out, not below 0. */
export function unbiasedCoherence(coherence: number, averages: number): number {
  return Math.max(0, coherence - (1 - coherence) ** 2 / averages)
}

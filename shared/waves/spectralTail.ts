/**
 * What lies above the cut-off, were the spectrum to go on as an equilibrium range S ∝ f⁻⁴ (Toba 1973, J. Oceanogr. Soc. Japan 29;
 * Donelan, Hamilton & Hui 1985, Phil. Trans. R. Soc. A 315): told beside the height, never put into it.
 */

/** Exponent of frequency. */
export const tailExponent = -4

/**
 * H_m0 in metres with the tail. `cutoff` in Hz; `densityAtCutoff` in m²/Hz, the mean of the last tenth below it. The tail from f_c to
 * infinity holds S(f_c) f_c / 3.
 */
export function heightWithTail(significantWaveHeight: number, cutoff: number, densityAtCutoff: number): number {
  const m0 = (significantWaveHeight / 4) ** 2
  return 4 * Math.sqrt(m0 + (Math.max(0, densityAtCutoff) * cutoff) / (-tailExponent - 1))
}

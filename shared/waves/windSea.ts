/**
 * Swell or wind sea, from the spectrum alone: the peak density of a system over that of a fully developed sea with the same peak
 * frequency (Portilla, Ocampo-Torres & Monbaliu 2009, J. Atmos. Oceanic Technol. 26, the 1-D rule, as remembered). Above 1: wind sea.
 */

/** Phillips' constant in the spectrum of Pierson & Moskowitz 1964. */
const phillips = 0.0081

/** α g² (2π)⁻⁴ f_p⁻⁵ e^{−5/4}, m²/Hz. */
export function fullyDevelopedPeak(frequency: number, gravity: number): number {
  return phillips * gravity * gravity * Math.pow(2 * Math.PI, -4) * Math.pow(frequency, -5) * Math.exp(-1.25)
}

export const systemName = (frequency: number, density: number, gravity: number): 'swell' | 'wind sea' =>
  density > fullyDevelopedPeak(frequency, gravity) ? 'wind sea' : 'swell'

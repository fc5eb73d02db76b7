/** Heights, periods and energy flux from a one-dimensional spectrum (Holthuijsen 2007; IEC/IAHR list of sea-state parameters 1987). */
import { groupSpeed } from './dispersion.ts'

export interface SpectralParameters {
  m0: number
  /** 4 √m₀, m. */
  significantWaveHeight: number
  /** T_m02 = √(m₀/m₂), s. */
  meanPeriod: number
  /** T_m01 = m₀/m₁, s. */
  firstMomentPeriod: number
  /** T_m−1,0 = m₋₁/m₀, s. */
  energyPeriod: number
  /** ρ g Σ S C_g Δf, W/m. */
  energyFlux: number
  /** Coefficient of variation of m₀ from sampling: √(Σ S² Δf / T) / m₀. */
  samplingError: number
}

/** Moments of a density (m²/Hz) on bins of the given widths. `duration` in s. Null where there is no energy. */
export function spectralParameters(
  frequency: ArrayLike<number>,
  width: ArrayLike<number>,
  density: ArrayLike<number>,
  depth: number,
  gravity: number,
  waterDensity: number,
  duration: number,
): SpectralParameters | null {
  let m0 = 0
  let m1 = 0
  let m2 = 0
  let inverse = 0
  let flux = 0
  let squares = 0
  for (let g = 0; g < frequency.length; g++) {
    const energy = density[g] * width[g]
    const f = frequency[g]
    m0 += energy
    m1 += f * energy
    m2 += f * f * energy
    inverse += energy / f
    flux += energy * groupSpeed(1 / f, depth, gravity)
    squares += density[g] * density[g] * width[g]
  }
  if (!(m0 > 0) || !(m1 > 0) || !(m2 > 0)) return null
  return {
    m0,
    significantWaveHeight: 4 * Math.sqrt(m0),
    meanPeriod: Math.sqrt(m0 / m2),
    firstMomentPeriod: m0 / m1,
    energyPeriod: inverse / m0,
    energyFlux: waterDensity * gravity * flux,
    samplingError: Math.sqrt(squares / duration) / m0,
  }
}

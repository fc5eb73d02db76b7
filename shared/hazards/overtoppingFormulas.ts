/**
 * Mean overtopping discharge by the mean value approach of the EurOtop manual (2018; equation numbers beside each). All take the
 * significant height H_m0 at the toe (m), T_m−1,0 (s), the free crest R_c above still water (m) and answer m³/s per metre of crest.
 * Slope coefficients and those of vertical walls were held against independent sources that cite the same numbers.
 */
import { standardGravity } from '../waves/dispersion.ts'
import { deepWaterLength } from './shoaling.ts'

export interface SeaAtToe {
  /** H_m0 at the toe, m. */
  height: number
  /** T_m−1,0, s. */
  energyPeriod: number
  /** Angle of the waves against the normal of the wall, rad. */
  obliquity: number
}

const unitDischarge = (height: number): number => Math.sqrt(standardGravity * height ** 3)
const stretched = (x: number): number => Math.exp(-(Math.max(0, x) ** 1.3))

/** ξ_m−1,0 = tan α / √(H_m0 / L_m−1,0). */
export const slopeSimilarity = (slope: number, { height, energyPeriod }: SeaAtToe): number =>
  slope / Math.sqrt(height / deepWaterLength(energyPeriod))

/** γ_β, short-crested sea: 1 − 0.0033 |β| smooth (5.29), 1 − 0.0063 |β| rubble (6.9), β in degrees and held at 80. */
export function obliquityFactor(obliquity: number, kind: 'smooth' | 'rubble'): number {
  const degrees = Math.min(80, (Math.abs(obliquity) * 180) / Math.PI)
  return 1 - (kind === 'smooth' ? 0.0033 : 0.0063) * degrees
}

/**
 * Slopes: breaking waves (5.10) capped by the maximum (5.11). No berm. A rubble mound (6.5) takes the maximum with its roughness.
 * `slope` = tan α of the seaward face, `roughness` = γ_f, 1 for smooth.
 */
export function slopeDischarge(
  sea: SeaAtToe,
  crest: number,
  slope: number,
  roughness: number,
  kind: 'smooth' | 'rubble',
): number {
  const { height } = sea
  const reduction = roughness * obliquityFactor(sea.obliquity, kind)
  const maximum = 0.09 * stretched((1.5 * crest) / (height * reduction))
  if (kind === 'rubble') return unitDischarge(height) * maximum
  const similarity = slopeSimilarity(slope, sea)
  const breaking =
    (0.023 / Math.sqrt(slope)) * similarity * stretched((2.7 * crest) / (similarity * height * reduction))
  return unitDischarge(height) * Math.min(breaking, maximum)
}

export type WallRegime = 'deep' | 'foreshore, not impulsive' | 'foreshore, impulsive'

/** h²/(H L) ≤ 0.23 is impulsive; a foreshore has influence where the depth at the wall is below 4 H_m0. L = g T_m−1,0²/2π. */
export function wallRegime({ height, energyPeriod }: SeaAtToe, toeDepth: number): WallRegime {
  if (toeDepth / height > 4) return 'deep'
  const impulse = toeDepth ** 2 / (height * deepWaterLength(energyPeriod))
  return impulse > 0.23 ? 'foreshore, not impulsive' : 'foreshore, impulsive'
}

/**
 * Vertical walls: 7.1 without influence of the foreshore, 7.5 with it but not impulsive, 7.7 and 7.8 impulsive. Obliquity is left out, as
 * waves square on: the answer is then an upper bound.
 */
export function wallDischarge(sea: SeaAtToe, crest: number, toeDepth: number): number {
  const { height, energyPeriod } = sea
  const relative = crest / height
  const regime = wallRegime(sea, toeDepth)
  if (regime === 'deep') return unitDischarge(height) * 0.047 * stretched(2.35 * relative)
  if (regime === 'foreshore, not impulsive') return unitDischarge(height) * 0.05 * Math.exp(-2.78 * relative)
  const steepness = height / deepWaterLength(energyPeriod)
  const root = Math.sqrt(height / (toeDepth * steepness))
  const decay = relative < 1.35 ? 0.011 * Math.exp(-2.2 * relative) : 0.0014 * relative ** -3
  return unitDischarge(height) * root * decay
}

/**
 * How much of a system's energy runs across and along an axis, its directional spread counted: E[sin²] and E[cos²] over D(θ).
 * Wave energy goes with the square of the height, so heights across and along are H √E[sin²] and H √E[cos²].
 */
import { spreadExponent } from '../waves/spreading.ts'
import type { DirectionalDensity, SeaSystem } from './sea.ts'

/**
 * Second moment about the mean direction, E[cos 2(θ−θ₀)] = s(s−1)/((s+1)(s+2)), of D ∝ cos^{2s}((θ−θ₀)/2) with the circular spread
 * σ = √(2/(s+1)) (Longuet-Higgins, Cartwright & Smith 1963). A spread of √2 or more is a sea from all sides: 0.
 */
export function secondMoment(spread: number): number {
  if (!(spread < Math.SQRT2)) return 0
  if (spread <= 0) return 1
  const s = spreadExponent(spread)
  return (s * (s - 1)) / ((s + 1) * (s + 2))
}

/** E[sin²] about an axis of a train of that heading and spread, all in radians; E[cos²] is the rest to 1. */
export const shareAcross = (heading: number, spread: number, axis: number): number =>
  (1 - secondMoment(spread) * Math.cos(2 * (heading - axis))) / 2

/**
 * Spread taken where the array tells none: cos^{2s} with s 25 for swell and 10 for wind sea (Goda, Random Seas and Design of Maritime
 * Structures; s written down from memory), rad, with half of it as ±.
 */
export const assumedSpread = (name: string): number => (name === 'swell' ? Math.sqrt(2 / 26) : Math.sqrt(2 / 11))

/** One system's cells of a directional density; `owner` null for those of no system. Shares of the whole energy. */
export interface DensityPart {
  owner: number | null
  energy: number
  across: number
}

/**
 * The energy of a directional density by system (its place in the list), and how much of it runs across the axis. A cell belongs to a
 * system whose band holds its frequency; of several the one with the nearest heading. Sums instead of integrals are exact on the circle
 * for what the density resolves; across frequencies the trapezoidal rule. Null for a density without energy.
 */
export function densityParts(
  directional: DirectionalDensity,
  systems: SeaSystem[],
  axis: number,
): DensityPart[] | null {
  const { frequency, heading, density } = directional
  const energy = new Float64Array(systems.length + 1)
  const across = new Float64Array(systems.length + 1)
  frequency.forEach((at, row) => {
    const width = (frequency[Math.min(row + 1, frequency.length - 1)] - frequency[Math.max(row - 1, 0)]) / 2 || 1
    const near = systems.flatMap(({ band }, index) => (at >= band.from && at <= band.to ? [index] : []))
    heading.forEach((toward, column) => {
      const owner = nearest(near, systems, toward)
      const here = density[row][column] * width
      energy[owner] += here
      across[owner] += here * Math.sin(toward - axis) ** 2
    })
  })
  const whole = energy.reduce((sum, one) => sum + one, 0)
  if (!(whole > 0)) return null
  return Array.from(energy, (one, owner) => ({
    owner: owner < systems.length ? owner : null,
    energy: one / whole,
    across: across[owner] / whole,
  }))
}

/** The system of most like heading, or the place after the last for none. */
function nearest(candidates: number[], systems: SeaSystem[], toward: number): number {
  let owner = systems.length
  let best = -2
  for (const index of candidates) {
    const closeness = Math.cos(toward - systems[index].heading.value)
    if (closeness > best) [owner, best] = [index, closeness]
  }
  return owner
}

/** Change of height with depth alone: the energy flux of a train at normal incidence stays the same (CEM EM 1110-2-1100, 2002, II-3-12). */
import { groupSpeed, standardGravity } from '../waves/dispersion.ts'

/** L₀ = g T² / 2π, m. */
export const deepWaterLength = (period: number, gravity = standardGravity): number =>
  (gravity * period * period) / (2 * Math.PI)

/** K_s = √(c₀ / (2 n c)): height at a depth over the height in deep water, without refraction. Period in s, depth in m. */
export const shoalingFromDeepWater = (period: number, depth: number, gravity = standardGravity): number =>
  Math.sqrt((gravity * period) / (4 * Math.PI) / groupSpeed(period, depth, gravity))

/** The height the same train has in deep water, refraction left out ("reverse shoaled"), m. */
export const deepWaterHeight = (height: number, period: number, depth: number, gravity = standardGravity): number =>
  height / shoalingFromDeepWater(period, depth, gravity)

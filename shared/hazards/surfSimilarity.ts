/**
 * Surf similarity and the type of the breakers: ξ = tan β / √(H/L₀) (Iribarren & Nogales 1949; Battjes 1974). By the deep-water height:
 * spilling below 0.5, plunging to 3.3, surging above; by the breaker height: 0.4 and 2.0 (Battjes 1974; CEM II-4; bounds from memory).
 */
import { check, determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame } from './figure.ts'
import { deepWaterLength } from './shoaling.ts'
import { propagate } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

export type BreakerType = 'spilling' | 'plunging' | 'surging'

/** Where the type changes. */
export const typeChanges = {
  deepWater: [0.5, 3.3],
  breaker: [0.4, 2.0],
} as const
const types: BreakerType[] = ['spilling', 'plunging', 'surging']
/** Within this share of a change both types are named. */
const nearShare = 0.2

/** ξ of a slope (tan β), height (m) and period (s). */
export const surfSimilarity = (slope: number, height: number, period: number): number =>
  slope / Math.sqrt(height / deepWaterLength(period))

/** One type, or two beside a change: "spilling to plunging" within 20 % of 0.5. */
export function breakerTypes(similarity: number, [lower, upper]: readonly [number, number]): BreakerType[] {
  const isNear = (bound: number): boolean => Math.abs(similarity / bound - 1) <= nearShare
  if (isNear(lower)) return ['spilling', 'plunging']
  if (isNear(upper)) return ['plunging', 'surging']
  return [similarity < lower ? 'spilling' : similarity < upper ? 'plunging' : 'surging']
}

/** The change that a similarity is near to, or null. */
export const nearChange = (similarity: number, changes: readonly number[]): number | null =>
  changes.find((bound) => Math.abs(similarity / bound - 1) <= nearShare) ?? null

export const typeWords = (found: BreakerType[]): string => found.join(' to ')

export interface SurfType {
  /** ξ₀ with the type in words. */
  similarity: Figure
  /** By the breaker height; null where that is not known. */
  atBreaking: { similarity: number; types: BreakerType[] } | null
  /** By either bound, from the gentler to the harder. */
  types: BreakerType[]
  /** The change of type it is near to, or null. */
  near: number | null
}

/**
 * @param deepHeight significant height in deep water, m
 * @param breakerHeight significant height at breaking, m, or null
 */
export function surfType(
  slope: Uncertain,
  deepHeight: Uncertain,
  period: Uncertain,
  breakerHeight: number | null,
): SurfType {
  const frame: FigureFrame = {
    unit: '1',
    method: {
      name: 'surf similarity',
      formula: 'ξ₀ = tan β / √(H₀/L₀)',
      source: 'Iribarren & Nogales 1949; Battjes 1974; bounds of the types from memory',
      fromMemory: true,
      assumptions: ['an even slope; a bar changes the type with the tide', 'the type of most waves, not of each'],
    },
    inputs: [
      input('slope at the break', slope.value, '1', slope.sd),
      input('deep-water height', deepHeight.value, 'm', deepHeight.sd),
      input('peak period', period.value, 's', period.sd),
    ],
    checks: [check('slope at the break', slope.value, '1', 0.001, 0.2)],
  }
  if (!(slope.value > 0) || !(deepHeight.value > 0) || !(period.value > 0)) {
    const reason = slope.value > 0 ? 'no waves run toward the shore' : 'the slope at the break is not known'
    return { similarity: undetermined(frame, reason), atBreaking: null, types: [], near: null }
  }
  const value = surfSimilarity(slope.value, deepHeight.value, period.value)
  const deep = breakerTypes(value, typeChanges.deepWater)
  const broken =
    breakerHeight !== null && breakerHeight > 0 ? surfSimilarity(slope.value, breakerHeight, period.value) : null
  const atBreaking = broken === null ? null : { similarity: broken, types: breakerTypes(broken, typeChanges.breaker) }
  const named = types.filter((type) => deep.includes(type) || atBreaking?.types.includes(type))
  const similarity = determined(frame, {
    value,
    words: typeWords(named.length > 2 ? deep : named),
    sd: propagate([slope, deepHeight, period], ([b, h, t]) => (h > 0 && t > 0 ? surfSimilarity(b, h, t) : null)),
    uncertaintyFrom:
      'slope, height and period, moved one standard deviation each; within 20 % of a change both types are named',
  })
  return { similarity, atBreaking, types: named, near: nearChange(value, typeChanges.deepWater) }
}

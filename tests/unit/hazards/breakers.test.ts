import { describe, expect, it } from 'vitest'
import { radiansFromEast } from '../../../shared/directions.ts'
import { breakerRules, godaLimit, komarGaughanHeight, weggelIndex } from '../../../shared/hazards/breakerRules.ts'
import { breakers, breakingPoint } from '../../../shared/hazards/breakers.ts'
import { isRefused, refract } from '../../../shared/hazards/refraction.ts'
import { shoalingFromDeepWater } from '../../../shared/hazards/shoaling.ts'
import { shorewardSea } from '../../../shared/hazards/shoreward.ts'
import { breakerTypes, nearChange, surfType, typeChanges } from '../../../shared/hazards/surfSimilarity.ts'
import { degree, fairwaySystems, sea, system } from './seas.ts'

const rule = (key: string) => {
  const found = breakerRules.find((one) => one.key === key)
  if (!found) throw new Error(key)
  return found
}

describe('the rules of breaking', () => {
  it('of CEM example II-4-1 (slope 1:100, 2 m, 10 s) give 2.7 m in 3.2 m of water', () => {
    const height = komarGaughanHeight(2, 10)
    expect(height).toBeCloseTo(2.677, 3)
    const index = weggelIndex(height, 10, 0.01)
    expect(index).toBeCloseTo(0.835, 3)
    expect(height / index).toBeCloseTo(3.206, 3)
  })

  it('of the same example come out of the whole search, from deep water straight in', () => {
    const deep = 200
    const measured = 2 * shoalingFromDeepWater(10, deep)
    const { rules } = breakers(
      {
        height: { value: measured, sd: 0 },
        period: { value: 10, sd: 0 },
        incidence: { value: 0, sd: 0 },
        depth: { value: deep, sd: 0 },
      },
      { value: 0.01, sd: 0 },
    )
    const found = rules.find(({ key }) => key === 'komarGaughan')
    expect(found?.height).toBeCloseTo(2.677, 3)
    expect(found?.depth).toBeCloseTo(3.206, 3)
  })

  it('of Miche at 3.2 m, 10 s gives 2.73 m, of Goda 2.50 m (2.52 m with K = 15)', () => {
    expect(rule('miche').limit(3.2, 10, 0.01)).toBeCloseTo(2.73, 2)
    expect(godaLimit(3.2, 10, 0.01)).toBeCloseTo(2.5, 2)
    expect(godaLimit(3.2, 10, 0.01, { slopeFactor: 15 })).toBeCloseTo(2.52, 2)
    expect(rule('goda').limit(3.2, 10, 0.01)).toBeCloseTo(0.7 * 2.5, 2)
  })

  it('of Weggel as a limit of height is his index at that height', () => {
    const limit = rule('weggel').limit(2.5, 9, 0.04)
    expect(limit / 2.5).toBeCloseTo(weggelIndex(limit, 9, 0.04), 12)
  })

  it('are met where the shoaling height equals the limit', () => {
    for (const one of breakerRules) {
      const point = breakingPoint(one, [1.9, 12.5, 20 * degree, 11.6, 0.05])
      if (!point) throw new Error(one.key)
      expect(point.height).toBeCloseTo(one.limit(point.depth, 12.5, 0.05), 6)
      const there = refract(20 * degree, 12.5, 11.6, point.depth)
      expect(isRefused(there) ? NaN : 1.9 * there.heightRatio).toBeCloseTo(point.height, 9)
    }
  })
})

describe('the significant breaker', () => {
  const fairway = sea(fairwaySystems.map(system))
  const shoreward = shorewardSea(fairway, radiansFromEast(218), 0.2)
  if (!shoreward) throw new Error('no sea toward the shore')
  const slope = { value: 0.05, sd: 0.01 }

  it('lies between the rules, with their spread in its ±', () => {
    const { height, depth, incidence, rules } = breakers(shoreward, slope)
    const heights = rules.map((one) => one.height ?? NaN)
    expect(height.value).toBeCloseTo((Math.min(...heights) + Math.max(...heights)) / 2, 12)
    expect(height.sd).toBeGreaterThan((Math.max(...heights) - Math.min(...heights)) / 2)
    expect(depth.value).toBeGreaterThan(height.value ?? NaN)
    expect(Math.abs(incidence.value ?? NaN)).toBeLessThan(23 * degree)
    expect(height.validity.inRange).toBe(true)
    expect(rules.find(({ key }) => key === 'mccowan')?.inRange).toBe(false)
  })

  it('counts every system that runs toward the shore and none that runs away', () => {
    expect(shoreward.height.value).toBeCloseTo(Math.hypot(1.9, 0.9), 9)
    const away = sea([system({ height: 2, period: 8, toward: 210 })])
    expect(shorewardSea(away, radiansFromEast(218), 0.2)).toBeNull()
  })

  it('is refused where the sea breaks already at the station', () => {
    const rough = { ...shoreward, height: { value: 4, sd: 0.2 }, depth: { value: 3, sd: 0.2 } }
    expect(breakers(rough, slope).height).toMatchObject({
      value: null,
      reason: 'the sea breaks already where it is measured',
    })
  })

  it('on a slope outside the rules stands with the reason beside it', () => {
    const { height } = breakers(shoreward, { value: 0.2, sd: 0.01 })
    expect(height.value).not.toBeNull()
    expect(height.validity).toMatchObject({ inRange: false })
  })
})

describe('the type of breakers', () => {
  it.each([
    [0.3, ['spilling']],
    [0.45, ['spilling', 'plunging']],
    [0.58, ['spilling', 'plunging']],
    [0.61, ['plunging']],
    [3.0, ['plunging', 'surging']],
    [5, ['surging']],
  ])('at a surf similarity of %s is %s, both within 20 % of a change', (similarity, types) => {
    expect(breakerTypes(similarity, typeChanges.deepWater)).toEqual(types)
  })

  it('of 2 m, 10 s on 1 in 20 is near the change at 0.5', () => {
    const found = surfType({ value: 0.05, sd: 0.005 }, { value: 2, sd: 0.1 }, { value: 10, sd: 0.3 }, 2.3)
    // ξ₀ = 0.05 / √(2 / 156.13).
    expect(found.similarity.value).toBeCloseTo(0.442, 3)
    expect(found.similarity.words).toBe('spilling to plunging')
    expect(nearChange(0.442, typeChanges.deepWater)).toBe(0.5)
    expect(found.near).toBe(0.5)
    // First order: every relative ± of slope, half of height's, that of period.
    expect(found.similarity.sd).toBeCloseTo(0.442 * Math.hypot(0.1, 0.025, 0.03), 3)
  })

  it('without a slope or without waves is not told', () => {
    const none = { value: 0, sd: 0 }
    const two = { value: 2, sd: 0.1 }
    const ten = { value: 10, sd: 0.3 }
    expect(surfType(none, two, ten, null).similarity.reason).toBe('the slope at the break is not known')
    expect(surfType({ value: 0.05, sd: 0 }, none, ten, null).similarity.reason).toBe('no waves run toward the shore')
  })
})

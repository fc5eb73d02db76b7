import { describe, expect, it } from 'vitest'
import { turnBetween } from '../../../shared/directions.ts'
import { estimate } from '../../../shared/waves/estimate.ts'
import { wallSea } from './reflectedSea.ts'
import type { WallOrder } from './reflectedSea.ts'
import { fiveSensors, spreadSea } from './spreadSea.ts'

const wall: WallOrder = {
  seed: 3,
  toward: 60,
  wallToward: 60,
  distance: 60,
  reflection: 0.6,
  peakPeriod: 9,
  height: 1,
  spread: 8,
  depth: 11,
  positions: fiveSensors,
}
const testOf = (result: ReturnType<typeof estimate>) => result.tests.find(({ test }) => test === 'standing sea')!

describe('a sea before a wall', { timeout: 20_000 }, () => {
  it.each([
    ['that throws back six tenths', { reflection: 0.6 }],
    ['that throws back all, so that it stands', { reflection: 1, distance: 20, seed: 5 }],
    ['that is met at a slant', { reflection: 0.8, wallToward: 72, seed: 7 }],
  ])('%s has no single vector and keeps its height', (_, changes) => {
    const result = estimate(wallSea({ ...wall, ...changes }))
    expect(result).toMatchObject({ resolved: false, reason: 'standing-sea', qualityFlag: 3, systems: [] })
    expect(result.significantWaveHeight).toBeGreaterThan(0.9)
    const { toward, opposedToward, amplitudeRatio, phaseLock, period } = result.opposedTrains!
    const [one, other] = [toward, opposedToward].map((bearing) => Math.abs(turnBetween(bearing, 60)))
    expect(Math.min(one!, other!)).toBeLessThan(15)
    expect(Math.abs(Math.abs(turnBetween(toward, opposedToward)) - 180)).toBeLessThan(40)
    expect(Math.abs(amplitudeRatio - (changes.reflection ?? 1))).toBeLessThan(0.12)
    expect(phaseLock).toBeGreaterThan(0.75)
    expect(Math.abs(period - 9)).toBeLessThan(1.2)
    expect(testOf(result).flag).toBe(3)
    expect(testOf(result).detail).toContain('no single vector')
  })

  it('that throws hardly anything back keeps its vector', () => {
    const result = estimate(wallSea({ ...wall, reflection: 0.15 }))
    expect(result.resolved).toBe(true)
    expect(result.opposedTrains).toBeNull()
    expect(Math.abs(turnBetween(result.systems[0].toward, 60))).toBeLessThan(4)
  })
})

describe('seas without a wall are not taken for one', { timeout: 30_000 }, () => {
  it('when two unrelated seas of one period run against each other', () => {
    for (const seed of [1, 2]) {
      const result = estimate(wallSea({ ...wall, seed, reflection: 0.9, isRelated: false }))
      expect(result.reason).not.toBe('standing-sea')
      expect(testOf(result).flag).toBe(1)
    }
  })

  it('when the waves are short-crested', () => {
    for (const seed of [1, 2]) {
      const sea = spreadSea({ seed, toward: 90 * seed, peakPeriod: 7, height: 1, spread: 35, depth: 11, positions: fiveSensors }) // prettier-ignore
      expect(estimate(sea).reason).not.toBe('standing-sea')
    }
  })

  it('when the clock of one sensor is two seconds off', () => {
    const sea = spreadSea({ seed: 9, toward: 132, peakPeriod: 9, height: 1, spread: 10, depth: 11, positions: fiveSensors }) // prettier-ignore
    const late = Float64Array.from(sea.series[3], (_, n) => sea.series[3][n - 4] ?? NaN)
    const result = estimate({ ...sea, series: sea.series.map((one, n) => (n === 3 ? late : one)) })
    expect(result.reason).not.toBe('standing-sea')
    expect(result.opposedTrains).toBeNull()
  })
})

describe('waves that break over the array', () => {
  it('give no single vector, and keep height and period', () => {
    const high = spreadSea({ seed: 4, toward: 40, peakPeriod: 9, height: 3.2, spread: 10, depth: 4, positions: fiveSensors }) // prettier-ignore
    const result = estimate({ ...high, settings: { ...high.settings, rangeShareOfDepth: 2 } })
    expect(result).toMatchObject({ resolved: false, reason: 'surf-zone', qualityFlag: 3, systems: [] })
    expect(result.significantWaveHeight! / result.waterDepth).toBeGreaterThan(0.6)
    const test = result.tests.find((one) => one.test === 'height over depth')
    expect(test).toMatchObject({ flag: 3, limit: 0.6 })
  })
})

import { describe, expect, it } from 'vitest'
import { turnBetween } from '../../../shared/directions.ts'
import { estimate } from '../../../shared/waves/estimate.ts'
import { seededSea } from '../../bench/seededSea.ts'
import type { SeededTrain } from '../../bench/seededSea.ts'

const positions = [
  { east: -16, north: -9 },
  { east: 14, north: -14 },
  { east: -3, north: 20 },
  { east: 4, north: 2 },
  { east: 20, north: 10 },
]
const swell: SeededTrain = { toward: 34, peakPeriod: 8, height: 0.9, spread: 17, gamma: 4 }
const windSea: SeededTrain = { toward: 100, peakPeriod: 5, height: 0.8, spread: 27, gamma: 3.3 }
const sea = (seed: number, trains: SeededTrain[]) =>
  seededSea({ seed, trains, depth: 11, positions, sampleRate: 2, seconds: 1200, noise: 0.02 })

describe('a swell and a wind sea whose peaks run together', () => {
  it.each([1, 2, 3, 4])('are told apart, both with their headings (sea %s)', { timeout: 20_000 }, (seed) => {
    const { systems } = estimate(sea(seed, [swell, windSea]))
    expect(systems).toHaveLength(2)
    const [long, short] = systems.toSorted((a, b) => b.peakPeriod - a.peakPeriod)
    for (const [found, made] of [
      [long, swell],
      [short, windSea],
    ] as const) {
      expect(Math.abs(turnBetween(found.toward, made.toward))).toBeLessThan(4 * found.headingSd)
      expect(found.headingSd).toBeLessThan(6)
      expect(Math.abs(found.peakPeriod / made.peakPeriod - 1)).toBeLessThan(0.12)
      expect(Math.abs(found.speedRatio - 1)).toBeLessThan(0.04)
    }
  })
})

describe('a single train', () => {
  it.each([
    [5, 30],
    [8, 25],
    [10, 35],
    [12, 12],
  ])('of %s s with a spread of %s° stays one', { timeout: 20_000 }, (peakPeriod, spread) => {
    for (const seed of [1, 2]) expect(estimate(sea(seed, [{ ...swell, peakPeriod, spread }])).systems).toHaveLength(1)
  })
})

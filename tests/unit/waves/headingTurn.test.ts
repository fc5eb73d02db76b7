import { describe, expect, it } from 'vitest'
import { turnBetween } from '../../../shared/directions.ts'
import { estimate } from '../../../shared/waves/estimate.ts'
import { seededSea } from '../../bench/seededSea.ts'
import type { SeededTrain } from '../../bench/seededSea.ts'

const positions = [
  { east: -14, north: -9 },
  { east: 13, north: -12 },
  { east: -2, north: 19 },
  { east: 3, north: 1 },
  { east: 21, north: 9 },
]
const longer: SeededTrain = { toward: 80, peakPeriod: 9.7, height: 1.2, spread: 19, gamma: 3.3 }
const shorter: SeededTrain = { toward: 106, peakPeriod: 7.6, height: 0.8, spread: 20, gamma: 2 }
const sea = (seed: number, trains: SeededTrain[]) =>
  seededSea({ seed, trains, depth: 12, positions, sampleRate: 2, seconds: 1200, noise: 0.02 })

const doubted = (result: ReturnType<typeof estimate>) => result.tests.find((test) => test.test === 'mixed seas')

describe('two seas too near each other to be told apart', () => {
  it.each([1, 2, 3])('are either told apart or doubted, never one sure heading (sea %s)', (seed) => {
    const result = estimate(sea(seed, [longer, shorter]))
    const [leading] = result.systems
    if (result.systems.length > 1) return
    expect(doubted(result)).toMatchObject({ flag: 3 })
    expect(result.qualityFlag).toBe(3)
    expect(Math.abs(turnBetween(leading.toward, longer.toward))).toBeLessThan(3 * leading.headingSd)
  })
})

describe('a single sea', () => {
  it.each([
    [6, 30],
    [9.7, 20],
    [12, 9],
  ])('of %s s with a spread of %s° has one heading at all frequencies', (peakPeriod, spread) => {
    const result = estimate(sea(1, [{ ...longer, peakPeriod, spread }]))
    expect(result.systems).toHaveLength(1)
    expect(doubted(result)).toBeUndefined()
    expect(result.systems[0].headingSd).toBeLessThan(3)
  })
})

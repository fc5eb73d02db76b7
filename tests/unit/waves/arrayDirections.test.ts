import { describe, expect, it } from 'vitest'
import { turnBetween } from '../../../shared/directions.ts'
import { capon, coherenceOf, conventional, iteratedCapon, steering } from '../../../shared/waves/directionalMethods.ts'
import { estimate } from '../../../shared/waves/estimate.ts'
import { seededSea } from '../../bench/seededSea.ts'
import { fiveSensors, spreadSea } from './spreadSea.ts'

const degrees = 180 / Math.PI
const count = 72

/** Mean direction and circular spread √(2(1−m₁)) (Kuik, van Vledder & Holthuijsen 1988), degrees. */
function moments(shares: ArrayLike<number>): { mean: number; spread: number } {
  let cos = 0
  let sin = 0
  let sum = 0
  for (let d = 0; d < shares.length; d++) {
    cos += shares[d] * Math.cos((2 * Math.PI * d) / shares.length)
    sin += shares[d] * Math.sin((2 * Math.PI * d) / shares.length)
    sum += shares[d]
  }
  const m1 = Math.hypot(cos, sin) / sum
  return { mean: Math.atan2(sin, cos) * degrees, spread: Math.sqrt(2 * (1 - m1)) * degrees }
}

describe('directional methods on the exact cross-spectra of a spread train', () => {
  const x = Float64Array.from([-16, 14, -3, 4, 20])
  const y = Float64Array.from([-9, -14, 20, 2, 10])

  it.each([
    [0.07, 12],
    [0.1, 17],
    [0.1, 27],
  ])('at a wave number of %s rad/m with a spread of %s°: IMLM gives it back, the others are wider', (k, spread) => {
    const steer = steering(x, y, k, count, 0)
    const s = 2 / (spread / degrees) ** 2 - 1
    const shape = Float64Array.from(
      { length: count },
      (_, d) => Math.abs(Math.cos(Math.PI * (d / count) - 0.5)) ** (2 * s),
    )
    const sum = shape.reduce((total, value) => total + value, 0)
    const matrix = coherenceOf(
      steer,
      shape.map((value) => value / sum),
      0.02,
    )
    const found = iteratedCapon(steer, matrix, 0.02)
    expect(found?.converged).toBe(true)
    const iterated = moments(found?.share ?? [])
    expect(Math.abs(iterated.mean - degrees)).toBeLessThan(0.6)
    expect(Math.abs(iterated.spread - spread)).toBeLessThan(2)
    const wide = moments(capon(steer, matrix) ?? []).spread
    expect(wide).toBeGreaterThan(iterated.spread + 5)
    expect(moments(conventional(steer, matrix)).spread).toBeGreaterThan(wide)
  })
})

describe('the directional spectrum of a sea', () => {
  it('has its energy, its heading and its spread, and no undetermined number', () => {
    const sea = spreadSea({
      seed: 21,
      toward: 200,
      peakPeriod: 10,
      height: 1,
      spread: 16,
      depth: 12,
      positions: fiveSensors,
    })
    const result = estimate(sea)
    const found = result.directionalSpectrum
    if (!found) throw new Error('no directional spectrum')
    expect(found).toMatchObject({ method: 'IMLM', converged: true })
    expect(found.density.flat().every((value) => value >= 0 && Number.isFinite(value))).toBe(true)
    const whole = found.directions.map((_, d) => found.density.reduce((sum, row) => sum + row[d], 0))
    const { mean, spread } = moments(whole)
    expect(Math.abs(turnBetween(mean, 200))).toBeLessThan(4)
    expect(Math.abs(spread - 16)).toBeLessThan(5)
    const peak = Math.max(...found.density.map((row) => 5 * row.reduce((sum, value) => sum + value, 0)))
    expect(peak).toBeGreaterThan(0.4 * Math.max(...(result.spectrum?.density ?? [])))
  })

  it('shows two trains that cross, each from its own side', () => {
    const train = { peakPeriod: 9, height: 1, spread: 12, gamma: 3.3 }
    const trains = [
      { ...train, toward: 20 },
      { ...train, toward: 110 },
    ]
    const sea = seededSea({
      seed: 4,
      trains,
      depth: 12,
      positions: fiveSensors,
      sampleRate: 2,
      seconds: 1200,
      noise: 0.02,
    })
    const found = estimate(sea).directionalSpectrum
    const whole = found?.directions.map((_, d) => found.density.reduce((sum, row) => sum + row[d], 0)) ?? []
    const at = (bearing: number) => whole[Math.round(bearing / 5) % 72]
    expect(Math.min(at(20), at(110))).toBeGreaterThan(2 * at(65))
    expect(at(65)).toBeGreaterThan(at(245))
  })
})

import { describe, expect, it } from 'vitest'
import { estimate } from '../../../shared/waves/estimate.ts'
import { heightWithTail } from '../../../shared/waves/spectralTail.ts'
import { meanOfHighestThird, upCrossingWaves } from '../../../shared/waves/waveByWave.ts'
import { fiveSensors, spreadSea, windowOf } from './spreadSea.ts'

const order = { seed: 21, toward: 80, peakPeriod: 8, height: 1.5, spread: 12, depth: 9, positions: fiveSensors }
const sea = spreadSea({ ...order, noise: 0.005 })

/** K_p = cosh(k z) / cosh(k h) with k by halving, apart from the program's own. */
function pressureOf(frequency: number, depth: number, above: number): number {
  let [low, high] = [1e-6, 10]
  for (let i = 0; i < 80; i++) {
    const k = (low + high) / 2
    if (9.81 * k * Math.tanh(k * depth) < (2 * Math.PI * frequency) ** 2) low = k
    else high = k
  }
  return Math.cosh(low * above) / Math.cosh(low * depth)
}

describe('single waves of a record', () => {
  it('of a sinusoid are as high as twice its amplitude and as long as its period', () => {
    const record = Float64Array.from({ length: 1000 }, (_, n) => 0.7 * Math.sin((2 * Math.PI * (n - 3)) / 40))
    const waves = upCrossingWaves(record, 4)
    expect(waves).toHaveLength(24)
    for (const { height, period } of waves) {
      expect(height).toBeCloseTo(1.4, 2)
      expect(period).toBeCloseTo(10, 6)
    }
  })

  it('that hold a missing sample are not counted', () => {
    const record = Float64Array.from({ length: 1000 }, (_, n) => Math.sin((2 * Math.PI * (n - 3)) / 40))
    const missing = new Uint8Array(1000)
    missing[205] = 1
    expect(upCrossingWaves(record, 4, missing)).toHaveLength(23)
  })

  it('give the mean of the highest third', () => {
    const waves = [1, 2, 3, 4, 5, 6].map((height) => ({ height, period: 1 }))
    expect(meanOfHighestThird(waves)).toBe(5.5)
  })
})

describe('wave by wave in an estimate', () => {
  const result = estimate(sea)

  // Longuet-Higgins 1952: H_1/3 = 4.004 sqrt(m0) for a narrow band, most probable H_max/H_1/3 = sqrt(ln N / 2).
  it('follows the Rayleigh distribution in a narrow sea', () => {
    const found = result.waveByWave!
    expect(found.isReconstructed).toBe(false)
    expect(Math.abs(found.significantHeight / result.significantWaveHeight! - 1)).toBeLessThan(0.06)
    expect(Math.abs(found.meanPeriod / result.meanPeriod! - 1)).toBeLessThan(0.05)
    const probable = Math.sqrt(Math.log(found.waves) / 2)
    expect(Math.abs(found.greatestHeight / found.significantHeight - probable)).toBeLessThan(0.35)
    expect(['A', 'B', 'C', 'D', 'E']).toContain(found.greatestAt)
  })

  it('of pressure at the bed is that of the surface it came from, and says that it was reconstructed', () => {
    // The swell is narrow, so that one response at its middle stands for all of it within a few per cent.
    const response = pressureOf(1 / 8, 9, 0.5)
    const decibars = sea.series.map((one) => one.map((metres) => (metres * response * 1025 * 9.81) / 1e4))
    const window = windowOf(decibars, fiveSensors, 9, 2)
    const sensors = window.sensors.map((sensor) => ({ ...sensor, kind: 'pressure' as const, heightAboveBed: 0.5 }))
    const found = estimate({ ...window, sensors }).waveByWave!
    expect(found.isReconstructed).toBe(true)
    expect(Math.abs(found.significantHeight / result.waveByWave!.significantHeight - 1)).toBeLessThan(0.06)
    expect(Math.abs(found.greatestHeight / result.waveByWave!.greatestHeight - 1)).toBeLessThan(0.12)
  })

  it('is not claimed of a record with too few waves', () => {
    const still = sea.series.map((one) => one.slice(0, 180))
    expect(estimate({ ...sea, series: still }).waveByWave).toBeNull()
  })
})

describe('the tail above the cut-off', () => {
  // The integral of S(fc) (f/fc)^-4 from fc on is S(fc) fc / 3, worked out by the midpoint rule here.
  it('adds what an equilibrium range would hold', () => {
    let tail = 0
    for (let f = 0.3 + 0.00005; f < 30; f += 0.0001) tail += 0.2 * (f / 0.3) ** -4 * 0.0001
    expect(heightWithTail(2, 0.3, 0.2)).toBeCloseTo(4 * Math.sqrt(0.25 + tail), 4)
    expect(heightWithTail(2, 0.3, 0)).toBe(2)
  })

  it('is told beside the height and not put into it', () => {
    const { spectrum } = estimate(sea)
    expect(spectrum!.tail!.exponent).toBe(-4)
    expect(spectrum!.tail!.significantWaveHeight).toBeGreaterThan(1)
  })
})

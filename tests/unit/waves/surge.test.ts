import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { estimate } from '../../../shared/waves/estimate.ts'
import { longWaves as longWavesOf, surgeHeight } from '../../../shared/waves/surge.ts'
import { fiveSensors, spreadSea } from './spreadSea.ts'

/** Made by surgeReference.py with scipy. */
const reference = z
  .object({ surge: z.number(), calm: z.number() })
  .parse(JSON.parse(readFileSync(join(import.meta.dirname, 'surgeReference.json'), 'utf8')))

const longWaves = [
  [0.0062, 0.04, 0.1],
  [0.0117, 0.06, 2],
  [0.0183, 0.05, 4],
  [0.0271, 0.03, 1],
  [0.0338, 0.02, 3],
]
const sine = (f: number, t: number, phase: number) => Math.sin(2 * Math.PI * f * t + phase)
const level = (share: number): Float64Array =>
  Float64Array.from({ length: 3600 }, (_, t) => {
    const tide = 1.4 * sine(1 / 44714, t, 0.4) + 0.3 * sine(1 / 22357, t, 0)
    const sea = 0.2 * sine(0.083, t, 0) + 0.15 * sine(0.11, t, 1)
    return tide + sea + longWaves.reduce((sum, [f, a, phase]) => sum + share * a * sine(f, t, phase), 0)
  })

describe('the surge height', () => {
  it('of long waves under tide and sea agrees with scipy, and with the sines put in', () => {
    expect(surgeHeight(level(1), 1)).toBeCloseTo(reference.surge, 9)
    const put = 4 * Math.sqrt(longWaves.reduce((sum, [, a]) => sum + (a * a) / 2, 0))
    expect(Math.abs((surgeHeight(level(1), 1) ?? 0) / put - 1)).toBeLessThan(0.03)
  })

  it('is the area under its own spectrum, which has a peak at each sine put in', () => {
    const spectrum = longWavesOf(level(1), 1)?.spectrum
    if (!spectrum) throw new Error('no spectrum')
    const step = spectrum.frequency[1] - spectrum.frequency[0]
    const inside = spectrum.density.filter((_, i) => spectrum.frequency[i] >= 0.004 && spectrum.frequency[i] <= 0.04)
    const m0 = inside.reduce((sum, density) => sum + density * step, 0)
    expect(4 * Math.sqrt(m0)).toBeCloseTo(reference.surge, 3)
    for (const [f] of longWaves) {
      const near = spectrum.density.filter((_, i) => Math.abs(spectrum.frequency[i] - f) < 1.5 * step)
      const far = spectrum.density.filter((_, i) => Math.abs(spectrum.frequency[i] - f - 0.0045) < step)
      expect(Math.max(...near)).toBeGreaterThan(2 * Math.min(...far))
    }
    expect(spectrum.degreesOfFreedom).toBe(11)
  })

  it('of tide and sea alone is next to nothing, as with scipy', () => {
    expect(surgeHeight(level(0), 1)).toBeCloseTo(reference.calm, 9)
    expect(reference.calm).toBeLessThan(0.005)
  })

  it('is bridged over seconds that are missing and refused for minutes', () => {
    const torn = level(1)
    torn.fill(NaN, 900, 904)
    expect(Math.abs((surgeHeight(torn, 1) ?? 0) / reference.surge - 1)).toBeLessThan(0.01)
    torn.fill(NaN, 900, 1200)
    expect(surgeHeight(torn, 1)).toBeNull()
  })

  it('is not given for less than an hour', () => {
    expect(surgeHeight(level(1).slice(0, 3000), 1)).toBeNull()
  })

  it('stands in the estimate of a window with an hour of level behind it', () => {
    const sea = spreadSea({
      seed: 3,
      toward: 80,
      peakPeriod: 9,
      height: 1,
      spread: 12,
      depth: 11,
      positions: fiveSensors,
    })
    expect(estimate(sea).surgeHeight).toBeNull()
    expect(estimate({ ...sea, surge: { sampleRate: 1, level: level(1) } }).surgeHeight).toBeCloseTo(reference.surge, 9)
  })
})

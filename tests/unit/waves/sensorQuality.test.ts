import { describe, expect, it } from 'vitest'
import { bridgeGaps } from '../../../shared/waves/bridgeGaps.ts'
import { detrend } from '../../../shared/waves/detrend.ts'
import { checkSeries } from '../../../shared/waves/sensorQuality.ts'
import { defaultEstimateSettings } from '../../../shared/waves/window.ts'
import { dice } from './spreadSea.ts'

const rate = 4
const next = dice(8)
const healthy = Float64Array.from({ length: 4800 }, (_, n) => {
  const t = n / rate
  return 0.4 * Math.sin(0.78 * t) + 0.2 * Math.sin(1.1 * t + 1) + 0.1 * Math.cos(1.9 * t) + 0.05 * (next() - 0.5)
})
const check = (series: Float64Array) => checkSeries('A', series, rate, 10, defaultEstimateSettings)
const spoil = (change: (series: Float64Array) => void): Float64Array => {
  const series = healthy.slice()
  change(series)
  return series
}

describe('the tests of one sensor', () => {
  it('find nothing in a healthy record', () => {
    expect(check(healthy)).toMatchObject({ findings: [], flag: 1, completeness: 1 })
  })

  it.each([1, 2, 3])('find spikes of %s samples and take them out', (length) => {
    const found = check(spoil((s) => s.fill(2.5, 1000, 1000 + length)))
    expect(found.findings).toContain('spike')
    expect(found.flag).toBe(3)
    for (let i = 0; i < length; i++) expect(found.clean[1000 + i]).toBeNaN()
    expect(found.completeness).toBeGreaterThan(0.998)
  })

  it('find a flat line and fail the sensor when it takes too much', () => {
    const found = check(spoil((s) => s.fill(0.123, 1200, 3200)))
    expect(found.findings).toContain('flat-line')
    expect(found.flag).toBe(4)
    expect(found.completeness).toBeCloseTo(2800 / 4800, 2)
  })

  it('find a long gap and a value out of range', () => {
    const found = check(
      spoil((s) => {
        s.fill(NaN, 100, 140)
        s[2000] = 30
      }),
    )
    expect(found.findings).toEqual(expect.arrayContaining(['gap', 'range']))
    expect(found.clean[2000]).toBeNaN()
  })

  it('call a silent sensor missing', () => {
    expect(check(new Float64Array(4800).fill(NaN))).toMatchObject({ flag: 9, findings: ['missing'], completeness: 0 })
  })
})

describe('gaps', () => {
  it('that are short are bridged smoothly, long ones stay at rest and are marked', () => {
    const wave = Float64Array.from({ length: 400 }, (_, n) => Math.sin(0.2 * n))
    const torn = wave.slice()
    torn.fill(NaN, 50, 54)
    torn.fill(NaN, 200, 240)
    const missing = bridgeGaps(torn, 8)
    for (let i = 50; i < 54; i++) expect(torn[i]).toBeCloseTo(wave[i], 1)
    expect(missing[52]).toBe(0)
    expect(missing[220]).toBe(1)
    expect(torn[220]).toBe(0)
  })
})

describe('a trend', () => {
  it('of level and tide is taken out and missing samples stay missing', () => {
    const flat = detrend(Float64Array.from({ length: 100 }, (_, n) => (n === 40 ? NaN : 3 + 0.02 * n)))
    expect(flat[40]).toBeNaN()
    for (let n = 0; n < 100; n++) if (n !== 40) expect(Math.abs(flat[n])).toBeLessThan(1e-12)
  })
})

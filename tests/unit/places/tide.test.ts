import { describe, expect, test } from 'vitest'
import { extremesOf, tideAt } from '../../../shared/places/tide.ts'

const at = Date.parse('2026-11-12T14:32:00Z')
const hour = 3_600_000
const nominal = { nominalLevel: { value: 0.3, sd: 0.8, source: 'mean level' } }

/** A cosine with high water at `high` and a period of 12.4 h, in steps of so many minutes. */
const cosine = (high: number, stepMinutes: number) =>
  Array.from({ length: Math.ceil((28 * 60) / stepMinutes) }, (_, n) => {
    const time = at - 14 * hour + n * stepMinutes * 60_000
    return { at: time, value: 1.9 + 0.5 * Math.cos((2 * Math.PI * (time - high)) / (12.4 * hour)), sd: 0.05 }
  })

describe('the tide at a place', () => {
  test('has its turning points within a minute and a millimetre of the curve, between readings of 20 min', () => {
    const high = at - 3.67 * hour
    const [low, ...rest] = extremesOf(cosine(high, 20)).filter(({ kind }) => kind === 'low')
    expect(rest).toHaveLength(1)
    expect(Math.abs(low.at - (high - 6.2 * hour))).toBeLessThan(60_000)
    expect(low.level).toBeCloseTo(1.4, 3)
  })

  test('tells level, stage and the nearest low water', () => {
    const readings = { stationName: 'Fairway', measured: [], predicted: cosine(at - 3.67 * hour, 20) }
    const tide = tideAt(readings, nominal, at)
    expect(tide).toMatchObject({ source: 'predicted', stage: 'falling', stationName: 'Fairway', sd: 0.05 })
    expect(tide.level).toBeCloseTo(1.9 + 0.5 * Math.cos((2 * Math.PI * 3.67) / 12.4), 2)
    expect((Date.parse(tide.lowWater?.at ?? '') - at) / hour).toBeCloseTo(6.2 - 3.67, 1)
    expect((Date.parse(tide.highWater?.at ?? '') - at) / hour).toBeCloseTo(12.4 - 3.67, 1)
  })

  test('stands at high water about its turn', () => {
    const readings = { stationName: 'Fairway', measured: [], predicted: cosine(at + 300_000, 20) }
    expect(tideAt(readings, nominal, at).stage).toBe('high water')
  })

  test('takes a measured level before a table’s', () => {
    const measured = [{ at: at - 60_000, value: 2.4, sd: 0.02 }]
    const readings = { stationName: 'Fairway', measured, predicted: cosine(at, 20) }
    expect(tideAt(readings, nominal, at)).toMatchObject({ source: 'measured', level: 2.4, stage: 'high water' })
  })

  test('without readings near is the nominal level, with its ±, and tells no stage', () => {
    const old = { stationName: 'Fairway', measured: [{ at: at - hour, value: 2, sd: 0.02 }], predicted: [] }
    expect(tideAt(old, nominal, at)).toMatchObject({ source: 'nominal', level: 0.3, sd: 0.8, stage: null, stationName: null }) // prettier-ignore
    expect(tideAt(null, nominal, at)).toMatchObject({ source: 'nominal', lowWater: null, highWater: null })
  })
})

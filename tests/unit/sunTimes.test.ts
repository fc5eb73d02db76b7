import { describe, expect, it } from 'vitest'
import { sunTimes } from '../../shared/sunTimes.ts'

const minutesOff = (ms: number | undefined, time: string): number =>
  Math.abs(((ms ?? Number.NaN) - Date.parse(time)) / 60_000)

describe('sun times', () => {
  // London (51.507 N, 0.128 W) as printed in almanacs: 21 June 2025 04:43 and 21:21 BST, 21 December 2025 08:04 and
  // 15:53 GMT.
  it('agree with the almanac for London at both solstices', () => {
    const june = sunTimes(Date.parse('2025-06-21T12:00:00Z'), 51.507, -0.128)
    expect(minutesOff(june?.riseMs, '2025-06-21T03:43:00Z')).toBeLessThan(2)
    expect(minutesOff(june?.setMs, '2025-06-21T20:21:00Z')).toBeLessThan(2)
    const december = sunTimes(Date.parse('2025-12-21T12:00:00Z'), 51.507, -0.128)
    expect(minutesOff(december?.riseMs, '2025-12-21T08:04:00Z')).toBeLessThan(2)
    expect(minutesOff(december?.setMs, '2025-12-21T15:53:00Z')).toBeLessThan(2)
  })

  // The equation of time is greatest about 3 November, +16 min 25 s (Explanatory Supplement to the Astronomical
  // Almanac): on the meridian of Greenwich the sun culminates at 11:43:35.
  it('culminate early in November by the equation of time', () => {
    const day = sunTimes(Date.parse('2026-11-03T12:00:00Z'), 0, 0)
    const noon = day ? (day.riseMs + day.setMs) / 2 : Number.NaN
    expect(minutesOff(noon, '2026-11-03T11:43:35Z')).toBeLessThan(0.3)
  })

  it('are null where the sun stays up or down all day', () => {
    expect(sunTimes(Date.parse('2026-06-21T12:00:00Z'), 80, 0)).toBeNull()
    expect(sunTimes(Date.parse('2026-12-21T12:00:00Z'), 80, 0)).toBeNull()
  })
})

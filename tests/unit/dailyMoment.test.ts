import { expect, test } from 'vitest'
import { latestDailyMoment } from '../../shared/dailyMoment.ts'

/** Changes of the clock in Lisbon in 2026: 29 March 01:00 UTC and 25 October 01:00 UTC (IANA tz, EU rule). */
test.each([
  ['in winter', '07:00', '2026-01-10T07:00:00Z', '2026-01-10T07:00:00Z'],
  ['a second before it', '07:00', '2026-01-10T06:59:59Z', '2026-01-09T07:00:00Z'],
  ['in summer', '07:00', '2026-07-10T06:00:00Z', '2026-07-10T06:00:00Z'],
  ['on the day after the change in spring', '07:00', '2026-03-29T06:00:00Z', '2026-03-29T06:00:00Z'],
  ['in the missing hour at the next minute that exists', '01:30', '2026-03-29T12:00:00Z', '2026-03-29T01:00:00Z'],
  ['in the doubled hour at the first of the two', '01:30', '2026-10-25T12:00:00Z', '2026-10-25T00:30:00Z'],
  ['in the second of the doubled hours still at the first', '01:30', '2026-10-25T01:29:00Z', '2026-10-25T00:30:00Z'],
])('a moment of the day comes %s', (_what, clock, now, expected) => {
  const found = latestDailyMoment(clock, 'Europe/Lisbon', Date.parse(now))
  expect(new Date(found).toISOString()).toBe(new Date(expected).toISOString())
})

test('a zone that does not exist is an error', () => {
  expect(() => latestDailyMoment('07:00', 'Nowhere/Land', 0)).toThrow(RangeError)
})

import { describe, expect, it } from 'vitest'
import { isWithin } from '../../../shared/alerts/timeSpan.ts'
import type { TimeSpan } from '../../../shared/schemas/limit.ts'

const everyDay = [1, 2, 3, 4, 5, 6, 7]
const hours = (from: string, to: string, days = everyDay): TimeSpan => ({ hours: { from, to, days }, season: null })
const season = (from: string, to: string): TimeSpan => ({ hours: null, season: { from, to } })
const at = (time: string) => Date.parse(time)

describe('hours', () => {
  it.each([
    ['2026-12-01T08:00:00Z', true],
    ['2026-12-01T07:59:00Z', false],
    ['2026-12-01T16:00:00Z', false],
  ])('from 08:00 to 16:00 at %s are %s', (time, isIn) => {
    expect(isWithin(hours('08:00', '16:00'), at(time), 'Etc/UTC')).toBe(isIn)
  })

  it('over midnight belong to the day they begin: those of Friday last into Saturday morning', () => {
    const friday = hours('22:00', '06:00', [5])
    expect(isWithin(friday, at('2026-12-04T23:00:00Z'), 'Etc/UTC')).toBe(true)
    expect(isWithin(friday, at('2026-12-05T05:00:00Z'), 'Etc/UTC')).toBe(true)
    expect(isWithin(friday, at('2026-12-04T05:00:00Z'), 'Etc/UTC')).toBe(false)
    expect(isWithin(friday, at('2026-12-05T23:00:00Z'), 'Etc/UTC')).toBe(false)
  })

  it('are kept by the local clock', () => {
    expect(isWithin(hours('08:00', '16:00'), at('2026-07-01T06:30:00Z'), 'Europe/Paris')).toBe(true)
    expect(isWithin(hours('08:00', '16:00'), at('2026-12-01T06:30:00Z'), 'Europe/Paris')).toBe(false)
  })

  it('hold twice in the doubled hour of autumn (25 Oct 2026, clocks back at 01:00 UTC)', () => {
    const night = hours('02:15', '02:45')
    expect(isWithin(night, at('2026-10-25T00:30:00Z'), 'Europe/Paris')).toBe(true)
    expect(isWithin(night, at('2026-10-25T01:30:00Z'), 'Europe/Paris')).toBe(true)
  })

  it('that begin in the missing hour of spring begin with the next minute there is (29 Mar 2026, 01:00 UTC)', () => {
    const night = hours('02:30', '04:00')
    expect(isWithin(night, at('2026-03-29T00:59:00Z'), 'Europe/Paris')).toBe(false)
    expect(isWithin(night, at('2026-03-29T01:00:00Z'), 'Europe/Paris')).toBe(true)
  })
})

describe('a season', () => {
  it('holds from its first day to its last, both included', () => {
    const bathing = season('05-15', '09-15')
    expect(['2026-05-14', '2026-05-15', '2026-09-15', '2026-09-16'].map((day) => isWithin(bathing, at(`${day}T12:00:00Z`), 'Etc/UTC'))).toEqual([false, true, true, false]) // prettier-ignore
  })

  it('may pass new year', () => {
    const winter = season('11-01', '02-28')
    expect(['2026-10-31', '2026-12-31', '2027-01-01', '2027-03-01'].map((day) => isWithin(winter, at(`${day}T12:00:00Z`), 'Etc/UTC'))).toEqual([false, true, true, false]) // prettier-ignore
  })
})

it('a zone that does not exist is refused', () => {
  expect(() => isWithin(season('01-01', '02-01'), 0, 'Mars/Olympus')).toThrow(RangeError)
})

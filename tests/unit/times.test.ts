import { describe, expect, it } from 'vitest'
import { clockLocal, clockUtc, clockUtcSeconds, dateUtc, momentUtc } from '../../shared/times.ts'

const moment = Date.UTC(2026, 10, 12, 14, 32, 7)

describe('a moment', () => {
  it('is written in UTC whatever the zone of the machine', () => {
    expect(clockUtc(moment)).toBe('14:32')
    expect(clockUtcSeconds(moment)).toBe('14:32:07')
  })

  it('has its date in words', () => {
    expect(dateUtc(moment)).toBe('Thu 12 Nov 2026')
  })

  it('of today is the clock alone, of an earlier day has its date', () => {
    expect(momentUtc(moment - 3_600_000, moment)).toBe('13:32')
    expect(momentUtc(moment - 30 * 3_600_000, moment)).toBe('Wed 11 Nov 2026 08:32')
  })

  it('in the zone of the port follows its offset, summer time included', () => {
    expect(clockLocal(moment, 'Etc/GMT-1')).toBe('15:32')
    expect(clockLocal(Date.UTC(2026, 6, 1, 12, 0), 'Europe/Lisbon')).toBe('13:00')
  })
})

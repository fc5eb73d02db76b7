import { describe, expect, it } from 'vitest'
import { deliveryMark, deliveryWords, toldWords } from '../../../src/components/messages/deliveryWords.ts'

const now = Date.parse('2026-11-12T14:32:00.000Z')
const accepted = {
  state: 'accepted',
  attempts: 1,
  nextAttemptAt: null,
  acceptedAt: '2026-11-12T14:20:00.000Z',
} as const
const waiting = { state: 'queued', attempts: 3, nextAttemptAt: '2026-11-12T14:34:00.000Z', acceptedAt: null } as const

describe('what became of an e-mail', () => {
  it('never calls an accepted one delivered or read', () => {
    expect(deliveryWords(accepted, now)).toBe('accepted by mail server 14:20')
    expect(toldWords([accepted], null, now)).toBe('accepted by mail server 14:20; no receipt yet')
    expect(deliveryMark([accepted], null)).toBe(2)
  })

  it('says how often it was tried and when next', () => {
    expect(deliveryWords(waiting, now)).toBe('not out: 3 tries, next 14:34')
    expect(deliveryWords({ ...waiting, attempts: 0 }, now)).toBe('not out yet: waits for the mail server')
    expect(deliveryMark([waiting], null)).toBe(9)
  })

  it('says that it is not known where the mail server broke off', () => {
    expect(deliveryWords({ ...waiting, state: 'unknown' }, now)).toContain('not known whether it went out')
  })

  it("holds the person's own word above all others", () => {
    expect(toldWords([accepted, waiting], '2026-11-12T14:22:00.000Z', now)).toBe('receipt confirmed 14:22')
    expect(deliveryMark([waiting], '2026-11-12T14:22:00.000Z')).toBe(1)
  })

  it('names every time of acceptance of several e-mails', () => {
    const second = { ...accepted, acceptedAt: '2026-11-12T14:28:00.000Z' }
    expect(toldWords([accepted, second], null, now)).toBe('accepted by mail server 14:20, 14:28; no receipt yet')
  })
})

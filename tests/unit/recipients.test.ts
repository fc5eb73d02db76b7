import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { chooseRecipients } from '../../server/services/messages/recipients.ts'
import type { Asked, Member, Reachable } from '../../server/services/messages/recipients.ts'

const person = (id: number, given: Partial<Reachable> = {}): Reachable => ({
  ...{ id, name: `Person ${id}`, email: `p${id}@harbour.example`, isDisabled: false, hours: null, isAbsent: false },
  ...{ deputyId: null, ...given },
})
const member = (personId: number, given: Partial<Member> = {}): Member => ({
  ...{ personId, hours: null, priorities: ['low', 'medium', 'high', 'urgent'], ...given },
})
const ask = (members: Member[], people: Reachable[], given: Partial<Asked> = {}) =>
  chooseRecipients({
    ...{ members, people: new Map(people.map((one) => [one.id, one])), priority: 'high' },
    ...{ at: Date.parse('2026-12-01T12:00:00Z'), timeZone: 'Etc/UTC', ...given },
  })
const idsOf = (chosen: ReturnType<typeof ask>) => chosen.recipients.map(({ personId }) => personId)

describe('recipients', () => {
  test('come from the deputy of the deputy where both are away, but a circle of deputies ends', () => {
    const away = { isAbsent: true }
    const chain = [person(1, { ...away, deputyId: 2 }), person(2, { ...away, deputyId: 3 }), person(3)]
    expect(idsOf(ask([member(1)], chain))).toEqual([3])
    const circle = [person(1, { ...away, deputyId: 2 }), person(2, { ...away, deputyId: 1 })]
    expect(ask([member(1)], circle)).toEqual({ recipients: [], unreached: ['Person 1'] })
  })

  test('are not those who are disabled or have no address, and their names are said', () => {
    const chosen = ask([member(1), member(2)], [person(1, { isDisabled: true }), person(2, { email: null })])
    expect(chosen).toEqual({ recipients: [], unreached: ['Person 1', 'Person 2'] })
  })

  test('outside the hours on the list are nobody, without a deputy', () => {
    const hours = { from: '20:00', to: '06:00', days: [1, 2, 3, 4, 5, 6, 7] }
    const people = [person(1, { deputyId: 2 }), person(2)]
    expect(ask([member(1, { hours })], people)).toEqual({ recipients: [], unreached: [] })
  })

  test('in the doubled hour of autumn are told in both, and in the missing hour of spring from the next minute', () => {
    const ofNight = (from: string, to: string) => [member(1, { hours: { from, to, days: [7] } })]
    const told = (members: Member[], at: string) =>
      idsOf(ask(members, [person(1)], { at: Date.parse(at), timeZone: 'Europe/Lisbon' })).length
    const autumn = ofNight('01:00', '02:00')
    expect(
      ['2026-10-25T00:30:00Z', '2026-10-25T01:30:00Z', '2026-10-25T02:30:00Z'].map((at) => told(autumn, at)),
    ).toEqual([1, 1, 0])
    const spring = ofNight('01:30', '03:00')
    expect(['2026-03-29T00:59:59Z', '2026-03-29T01:00:00Z'].map((at) => told(spring, at))).toEqual([0, 1])
  })

  test('are each address once, all reachable, whatever the lists and deputies are', () => {
    const id = fc.integer({ min: 1, max: 6 })
    const anybody = fc.record({ isAbsent: fc.boolean(), isDisabled: fc.boolean(), deputyId: fc.option(id) })
    fc.assert(
      fc.property(fc.array(id, { maxLength: 12 }), fc.array(anybody, { minLength: 6, maxLength: 6 }), (ids, given) => {
        const people = given.map((one, n) => person(n + 1, one))
        const chosen = idsOf(ask(ids.map((one) => member(one)), people)) // prettier-ignore
        expect(new Set(chosen).size).toBe(chosen.length)
        for (const one of chosen) expect(people[one - 1]).toMatchObject({ isAbsent: false, isDisabled: false })
        for (const one of ids) if (!given[one - 1].isAbsent && !given[one - 1].isDisabled) expect(chosen).toContain(one)
      }),
    )
  })
})

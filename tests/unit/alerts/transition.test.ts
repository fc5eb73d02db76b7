import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { alertCauses, causeOf, isAside, table, transition } from '../../../shared/alerts/transition.ts'
import type { AlertCause, Facts } from '../../../shared/alerts/transition.ts'
import { alertState } from '../../../shared/schemas/limit.ts'
import type { AlertState } from '../../../shared/schemas/limit.ts'

const facts: Facts = { isActive: false, latches: false, isShelved: false, isSuppressed: false }
const states = alertState.options

/** Every row of the life cycle of ANSI/ISA-18.2-2016, figure of the alarm state transitions, with its re-alarm. */
const rows: [AlertState, AlertCause, Partial<Facts>, AlertState][] = [
  ['normal', 'raise', { isActive: true }, 'unacknowledgedActive'],
  ['unacknowledgedActive', 'acknowledge', { isActive: true }, 'acknowledgedActive'],
  ['unacknowledgedActive', 'clear', {}, 'returnedUnacknowledged'],
  ['unacknowledgedActive', 'clear', { latches: true }, 'latchedUnacknowledged'],
  ['acknowledgedActive', 'clear', {}, 'normal'],
  ['acknowledgedActive', 'clear', { latches: true }, 'latchedAcknowledged'],
  ['returnedUnacknowledged', 'acknowledge', {}, 'normal'],
  ['returnedUnacknowledged', 'raise', { isActive: true }, 'unacknowledgedActive'],
  ['latchedUnacknowledged', 'acknowledge', { latches: true }, 'latchedAcknowledged'],
  ['latchedUnacknowledged', 'raise', { isActive: true, latches: true }, 'unacknowledgedActive'],
  ['latchedAcknowledged', 'reset', { latches: true }, 'normal'],
  ['latchedAcknowledged', 'raise', { isActive: true, latches: true }, 'unacknowledgedActive'],
  ['shelved', 'unshelve', { isActive: true }, 'unacknowledgedActive'],
  ['shelved', 'unshelve', {}, 'normal'],
  ['shelved', 'unshelve', { isSuppressed: true }, 'suppressed'],
  ['suppressed', 'resume', { isActive: true }, 'unacknowledgedActive'],
  ['suppressed', 'resume', {}, 'normal'],
  ['suppressed', 'resume', { isShelved: true, isActive: true }, 'shelved'],
  ['outOfService', 'putBack', { isActive: true }, 'unacknowledgedActive'],
  ['outOfService', 'putBack', {}, 'normal'],
  ['outOfService', 'putBack', { isSuppressed: true, isActive: true }, 'suppressed'],
]
const judged = states.filter((state) => !isAside(state))

describe('the life cycle', () => {
  it.each(rows)('from %s by %s with %j is %s', (state, cause, given, to) => {
    expect(transition(state, cause, { ...facts, ...given })?.to).toBe(to)
  })

  it.each(judged)('puts %s on the shelf, suppresses it and takes it out of service', (state) => {
    expect(transition(state, 'shelve', facts)?.to).toBe('shelved')
    expect(transition(state, 'suppress', facts)?.to).toBe('suppressed')
    expect(transition(state, 'takeOut', facts)?.to).toBe('outOfService')
  })

  it.each(['shelved', 'suppressed', 'outOfService'] as const)(
    'still follows the condition while %s, and tells nobody',
    (state) => {
      for (const cause of ['raise', 'clear'] as const) {
        expect(transition(state, cause, { ...facts, isActive: cause === 'raise' })).toEqual({
          to: state,
          isAnnounced: false,
          isAllClear: false,
        })
      }
      expect(transition(state, 'acknowledge', facts)).toBeNull()
    },
  )

  it('lets out-of-service return by an authorised person alone', () => {
    const ways = alertCauses.filter((cause) => transition('outOfService', cause, facts)?.to !== 'outOfService')
    expect(ways.filter((cause) => transition('outOfService', cause, facts) !== null)).toEqual(['putBack'])
  })

  it('refuses what the table has no row for', () => {
    expect(transition('normal', 'acknowledge', facts)).toBeNull()
    expect(transition('acknowledgedActive', 'acknowledge', facts)).toBeNull()
    expect(transition('unacknowledgedActive', 'raise', facts)).toBeNull()
    expect(transition('latchedUnacknowledged', 'reset', facts)).toBeNull()
  })

  it('announces whenever something becomes active and not acknowledged', () => {
    for (const [state, cause, given, to] of rows) {
      const step = transition(state, cause, { ...facts, ...given })
      expect([state, cause, step?.isAnnounced]).toEqual([state, cause, to === 'unacknowledgedActive'])
    }
  })
})

/** The limit as the program keeps it, beside what must hold of it: commands in any order. */
interface Model {
  isActive: boolean
  isShelved: boolean
  isSuppressed: boolean
  isOut: boolean
}
interface Real {
  state: AlertState
}

class Happen implements fc.Command<Model, Real> {
  constructor(
    readonly cause: AlertCause | 'seaRises' | 'seaFalls',
    readonly latches: boolean,
  ) {}

  check = (): boolean => true

  run(model: Model, real: Real): void {
    const before = real.state
    if (this.cause === 'seaRises') model.isActive = true
    if (this.cause === 'seaFalls') model.isActive = false
    const cause = this.cause === 'seaRises' || this.cause === 'seaFalls' ? causeOf(before, model.isActive) : this.cause
    if (cause === null || cause === 'raise' || cause === 'clear') {
      if (this.cause !== 'seaRises' && this.cause !== 'seaFalls') return
      if (cause === null) return
    }
    const next = { ...model }
    if (cause === 'shelve') next.isShelved = true
    if (cause === 'unshelve' || cause === 'takeOut') next.isShelved = false
    if (cause === 'suppress') next.isSuppressed = true
    if (cause === 'resume') next.isSuppressed = false
    if (cause === 'takeOut') next.isOut = true
    if (cause === 'putBack') next.isOut = false
    const step = transition(before, cause, { ...next, latches: this.latches })
    if (step === null) return
    Object.assign(model, next)
    real.state = step.to
    this.mustHold(model, real, before, cause)
  }

  private mustHold(model: Model, { state }: Real, before: AlertState, cause: AlertCause): void {
    expect(states).toContain(state)
    // Out of service ends by nobody but an operator.
    expect(state === 'outOfService').toBe(model.isOut)
    if (state === 'shelved') expect(model.isShelved).toBe(true)
    if (state === 'suppressed') expect(model.isSuppressed).toBe(true)
    // What is active and not put aside is shown as active.
    if (!isAside(state)) expect(state.endsWith('Active')).toBe(model.isActive)
    // Nothing that nobody acknowledged is over without having been put aside.
    if (before === 'unacknowledgedActive' && state === 'normal') throw new Error(`forgotten by ${cause}`)
    if (state === 'acknowledgedActive') expect([before, cause]).toEqual(['unacknowledgedActive', 'acknowledge'])
    expect(Object.keys(table[before])).toContain(cause)
  }

  toString = (): string => this.cause
}

describe('any order of events', () => {
  it('leads to no state that the table forbids', () => {
    const one = fc
      .tuple(fc.constantFrom(...alertCauses, 'seaRises' as const, 'seaFalls' as const), fc.boolean())
      .map(([cause, latches]) => new Happen(cause, latches))
    fc.assert(
      fc.property(fc.commands([one], { maxCommands: 60 }), (commands) => {
        const setup = (): { model: Model; real: Real } => ({
          model: { isActive: false, isShelved: false, isSuppressed: false, isOut: false },
          real: { state: 'normal' },
        })
        fc.modelRun(setup, commands)
      }),
      { numRuns: 500, seed: 18 },
    )
  })
})

/**
 * The life cycle of an alert as a table (ANSI/ISA-18.2-2016, IEC 62682:2022; states A to I). Whether the condition is
 * active, with its delays, is followed apart from the life cycle: shelved, suppressed and out-of-service limits are
 * still evaluated, and on return they are asked afresh.
 */
import type { AlertState } from '../schemas/limit.ts'

export const alertCauses = [
  /** The condition became active, or was cleared, with their delays. */
  'raise',
  'clear',
  'acknowledge',
  /** Lets go what latched. */
  'reset',
  'shelve',
  /** By a person, at the end of its time, or because the priority rose. */
  'unshelve',
  /** The design logic: station in maintenance, out of season; and its end. */
  'suppress',
  'resume',
  'takeOut',
  'putBack',
] as const
export type AlertCause = (typeof alertCauses)[number]

/** What holds after the event. */
export interface Facts {
  isActive: boolean
  latches: boolean
  isShelved: boolean
  isSuppressed: boolean
}

/** `afresh`: by the facts. `returned` and `acknowledgedReturn`: latched where the limit latches. */
type Target = AlertState | 'afresh' | 'returned' | 'acknowledgedReturn'

const aside: Partial<Record<AlertCause, Target>> = {
  shelve: 'shelved',
  suppress: 'suppressed',
  takeOut: 'outOfService',
}

/** An event without a row here is refused. */
export const table: Record<AlertState, Partial<Record<AlertCause, Target>>> = {
  normal: { raise: 'unacknowledgedActive', ...aside },
  unacknowledgedActive: { acknowledge: 'acknowledgedActive', clear: 'returned', ...aside },
  acknowledgedActive: { clear: 'acknowledgedReturn', ...aside },
  returnedUnacknowledged: { acknowledge: 'normal', raise: 'unacknowledgedActive', ...aside },
  latchedUnacknowledged: { acknowledge: 'latchedAcknowledged', raise: 'unacknowledgedActive', ...aside },
  latchedAcknowledged: { reset: 'normal', raise: 'unacknowledgedActive', ...aside },
  shelved: {
    raise: 'shelved',
    clear: 'shelved',
    unshelve: 'afresh',
    suppress: 'suppressed',
    takeOut: 'outOfService',
  },
  suppressed: {
    raise: 'suppressed',
    clear: 'suppressed',
    unshelve: 'suppressed',
    resume: 'afresh',
    takeOut: 'outOfService',
  },
  outOfService: {
    raise: 'outOfService',
    clear: 'outOfService',
    unshelve: 'outOfService',
    suppress: 'outOfService',
    resume: 'outOfService',
    putBack: 'afresh',
  },
}

function resolve(target: Target, { isActive, latches, isShelved, isSuppressed }: Facts): AlertState {
  if (target === 'returned') return latches ? 'latchedUnacknowledged' : 'returnedUnacknowledged'
  if (target === 'acknowledgedReturn') return latches ? 'latchedAcknowledged' : 'normal'
  if (target !== 'afresh') return target
  if (isSuppressed) return 'suppressed'
  if (isShelved) return 'shelved'
  return isActive ? 'unacknowledgedActive' : 'normal'
}

export interface Transition {
  to: AlertState
  /** People are told: it became active and nobody has acknowledged it. */
  isAnnounced: boolean
  /** It was announced as active and is no longer. */
  isAllClear: boolean
}

const announced: AlertState[] = ['unacknowledgedActive', 'acknowledgedActive']

/** Null: the table has no such row. */
export function transition(state: AlertState, cause: AlertCause, facts: Facts): Transition | null {
  const target = table[state][cause]
  if (target === undefined) return null
  const to = resolve(target, facts)
  return {
    to,
    isAnnounced: to === 'unacknowledgedActive' && state !== to,
    isAllClear: cause === 'clear' && announced.includes(state),
  }
}

/** Which event the followed condition causes in this state; null: none, for the state says so already. */
export function causeOf(state: AlertState, isActive: boolean): 'raise' | 'clear' | null {
  if (announced.includes(state)) return isActive ? null : 'clear'
  const isReturned =
    state === 'normal' || state === 'returnedUnacknowledged' || state === 'latchedUnacknowledged' || state === 'latchedAcknowledged' // prettier-ignore
  return isReturned && isActive ? 'raise' : null
}

/** Put aside: evaluated and logged, but nobody is told. */
export const isAside = (state: AlertState): boolean =>
  state === 'shelved' || state === 'suppressed' || state === 'outOfService'

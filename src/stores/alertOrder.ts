/** The order in which alerts are shown, and what is counted of them. Pure. */
import type { AlertView } from '../../shared/schemas/alert.ts'
import type { AlertState, LimitView, Priority } from '../../shared/schemas/limit.ts'

/** One row of the list: an alert, or a limit that is put aside without one. */
export interface AlertRow {
  key: string
  state: AlertState
  priority: Priority
  /** ms since 1970 UTC; newest first within. */
  at: number
  alert: AlertView | null
  limit: LimitView | null
}

export const priorityRank: Record<Priority, number> = { urgent: 0, high: 1, medium: 2, low: 3 }

/** Active not acknowledged, active acknowledged, cleared not acknowledged, shelved, out of service. */
export const stateRank: Record<AlertState, number> = {
  unacknowledgedActive: 0,
  acknowledgedActive: 1,
  returnedUnacknowledged: 2,
  latchedUnacknowledged: 2,
  latchedAcknowledged: 2,
  shelved: 3,
  suppressed: 4,
  outOfService: 5,
  normal: 6,
}

export const isActive = (state: AlertState): boolean =>
  state === 'unacknowledgedActive' || state === 'acknowledgedActive'
export const isCleared = (state: AlertState): boolean =>
  state === 'returnedUnacknowledged' || state === 'latchedUnacknowledged' || state === 'latchedAcknowledged'
/** Waits for an operator. */
export const needsAcknowledgement = (state: AlertState): boolean =>
  state === 'unacknowledgedActive' || state === 'returnedUnacknowledged' || state === 'latchedUnacknowledged'
/** Keeps wash and row height until it is cleared, acknowledged or not. */
export const isSalient = ({ state, priority }: { state: AlertState; priority: Priority }): boolean =>
  isActive(state) && priorityRank[priority] <= 1

export const rowOfAlert = (alert: AlertView): AlertRow => ({
  key: `alert-${alert.id}`,
  state: alert.state,
  priority: alert.priority,
  at: Date.parse(alert.raisedAt),
  alert,
  limit: null,
})

export const rowOfLimit = (limit: LimitView): AlertRow => ({
  key: `limit-${limit.id}`,
  state: limit.state,
  priority: limit.current.content.priority,
  at: Date.parse(limit.stateSince),
  alert: null,
  limit,
})

export const compareRows = (a: AlertRow, b: AlertRow): number =>
  stateRank[a.state] - stateRank[b.state] ||
  priorityRank[a.priority] - priorityRank[b.priority] ||
  b.at - a.at ||
  (a.key < b.key ? 1 : -1)

export interface AlertTally {
  active: number
  /** Active and not acknowledged: new on the watch. */
  fresh: number
  cleared: number
  shelved: number
  suppressed: number
  outOfService: number
  byPriority: Record<Priority, number>
}

export function tally(rows: readonly AlertRow[]): AlertTally {
  const counted: AlertTally = {
    ...{ active: 0, fresh: 0, cleared: 0, shelved: 0, suppressed: 0, outOfService: 0 },
    byPriority: { low: 0, medium: 0, high: 0, urgent: 0 },
  }
  for (const { state, priority, alert } of rows) {
    if (isActive(state)) counted.active += 1
    if (state === 'unacknowledgedActive') counted.fresh += 1
    if (isCleared(state)) counted.cleared += 1
    if (state === 'shelved') counted.shelved += 1
    if (state === 'suppressed') counted.suppressed += 1
    if (state === 'outOfService') counted.outOfService += 1
    if (alert) counted.byPriority[priority] += 1
  }
  return counted
}

/** Which of two answers about one alert is the newer: a change raises its version, a new window its figures. */
export function isNewerAlert(next: AlertView, held: AlertView | undefined): boolean {
  if (!held) return true
  if (next.version !== held.version) return next.version > held.version
  const later = Date.parse(next.windowEndsAt) - Date.parse(held.windowEndsAt)
  return later > 0 || (later === 0 && next.revision >= held.revision)
}

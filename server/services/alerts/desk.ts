/** One transaction's work on limits and alerts: what it holds locked, and the news that goes out after commit. */
import type { Transaction } from 'sequelize'
import type { Parts } from '../../config/parts.ts'
import { alertState } from '../../../shared/schemas/limit.ts'
import type { AlertState } from '../../../shared/schemas/limit.ts'
import type { Track } from '../../../shared/alerts/follow.ts'
import { execute, select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'
import type { Office } from './office.ts'

export interface Desk {
  parts: Parts
  office: Office
  transaction: Transaction
  /** ms since 1970 UTC, the same in the whole transaction. */
  now: number
  changed: { alerts: Set<number>; limits: Set<number>; messages: Map<number, number | null> }
}

/** News is published after commit: an earlier try of the same work leaves none. */
export async function atDesk<Result>(
  parts: Parts,
  office: Office,
  work: (desk: Desk) => Promise<Result>,
): Promise<Result> {
  const { result, changed } = await inTransaction(parts.sequelize, async (transaction) => {
    const desk: Desk = {
      ...{ parts, office, transaction },
      now: parts.clock.now().getTime(),
      changed: { alerts: new Set(), limits: new Set(), messages: new Map() },
    }
    return { result: await work(desk), changed: desk.changed }
  })
  for (const limitId of changed.limits) parts.bus.publish('limit.changed', { limitId })
  for (const alertId of changed.alerts) parts.bus.publish('alert.changed', { alertId })
  for (const [messageId, alertId] of changed.messages) parts.bus.publish('message.changed', { messageId, alertId })
  return result
}

/** A limit's state while its row is locked. Times are ms since 1970 UTC. */
export interface HeldState {
  limitId: number
  state: AlertState
  since: number
  track: Track
  lastWindowEndsAt: number | null
  lastRevision: number | null
  value: number | null
  valueSd: number | null
  notJudged: string | null
}

interface StateRow {
  limitId: number
  state: string
  since: Date
  isActive: number
  activeSince: Date | null
  crossedAt: Date | null
  pendingSince: Date | null
  lastKnownAt: Date | null
  lastWindowEndsAt: Date | null
  lastRevision: number | null
  value: number | null
  valueSd: number | null
  notJudged: string | null
}

const msOf = (date: Date | null): number | null => date?.getTime() ?? null
const dateOf = (ms: number | null): Date | null => (ms === null ? null : new Date(ms))

/** Locks the states of these limits, always by rising id, and answers them by limit. */
export async function holdStates({ parts, transaction }: Desk, limitIds: number[]): Promise<Map<number, HeldState>> {
  if (limitIds.length === 0) return new Map()
  const rows = await select<StateRow>(
    parts.sequelize,
    'SELECT * FROM limitStates WHERE limitId IN (:limitIds) ORDER BY limitId FOR UPDATE',
    { limitIds },
    transaction,
  )
  return new Map(
    rows.map((row) => {
      const { activeSince, crossedAt, pendingSince, lastKnownAt } = row
      const held: HeldState = {
        limitId: row.limitId,
        state: alertState.parse(row.state),
        since: row.since.getTime(),
        track: {
          isActive: Boolean(row.isActive),
          activeSince: msOf(activeSince),
          crossedAt: msOf(crossedAt),
          pendingSince: msOf(pendingSince),
          lastKnownAt: msOf(lastKnownAt),
        },
        lastWindowEndsAt: msOf(row.lastWindowEndsAt),
        lastRevision: row.lastRevision,
        value: row.value,
        valueSd: row.valueSd,
        notJudged: row.notJudged,
      }
      return [row.limitId, held]
    }),
  )
}

const written = `limitId, state, since, isActive, activeSince, crossedAt, pendingSince, lastKnownAt, lastWindowEndsAt,
  lastRevision, value, valueSd, notJudged`

/** All in one statement. */
export async function keepStates({ parts, transaction }: Desk, states: HeldState[]): Promise<void> {
  if (states.length === 0) return
  const rows = states.map(({ track, ...held }) => [
    held.limitId,
    held.state,
    new Date(held.since),
    track.isActive,
    dateOf(track.activeSince),
    dateOf(track.crossedAt),
    dateOf(track.pendingSince),
    dateOf(track.lastKnownAt),
    dateOf(held.lastWindowEndsAt),
    held.lastRevision,
    held.value,
    held.valueSd,
    held.notJudged,
  ])
  const renewed = written.split(/,\s*/).slice(1).map((name) => `${name} = VALUES(${name})`) // prettier-ignore
  await execute(
    parts.sequelize,
    `INSERT INTO limitStates (${written}) VALUES :rows ON DUPLICATE KEY UPDATE ${renewed.join(', ')}`,
    { rows },
    transaction,
  )
}

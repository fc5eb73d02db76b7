/** In a flood: urgent and high that wait keep rows of their own, the rest folds to counts by cause. Pure. */
import type { AlertBoard } from '../../../shared/schemas/alert.ts'
import type { AlertState, Priority } from '../../../shared/schemas/limit.ts'
import { needsAcknowledgement, priorityRank } from '../../stores/alertOrder.ts'
import type { AlertRow } from '../../stores/alertOrder.ts'

export interface FloodGroup {
  key: string
  /** `Pennow Bar: 21 alerts`. */
  title: string
  /** `3 high acknowledged, 11 medium, 7 low; 17 not acknowledged`. */
  words: string
  priority: Priority
  state: AlertState
  rows: AlertRow[]
  /** Medium and low that wait: they may be acknowledged together, from their list. */
  together: number[]
}

const order: Priority[] = ['urgent', 'high', 'medium', 'low']

export function floodGroups(
  rows: readonly AlertRow[],
  flood: NonNullable<AlertBoard['flood']>,
): { own: AlertRow[]; groups: FloodGroup[] } {
  const own: AlertRow[] = []
  const causeOf = new Map(
    flood.causes.flatMap(({ subject, alertIds }) => alertIds.map((id) => [id, subject.name] as const)),
  )
  const folded = new Map<string, AlertRow[]>()
  for (const row of rows) {
    const isGrave = priorityRank[row.priority] <= 1 && (row.state === 'unacknowledgedActive' || row.state === 'acknowledgedActive') // prettier-ignore
    const cause = row.alert && (causeOf.get(row.alert.id) ?? row.alert.subject.name)
    if (!cause || (isGrave && row.state === 'unacknowledgedActive')) own.push(row)
    else folded.set(cause, [...(folded.get(cause) ?? []), row])
  }
  const groups = [...folded].map(([name, members]) => groupOf(name, members))
  groups.sort((a, b) => priorityRank[a.priority] - priorityRank[b.priority] || b.rows.length - a.rows.length)
  return { own, groups }
}

function groupOf(name: string, rows: AlertRow[]): FloodGroup {
  const priority = order.find((one) => rows.some((row) => row.priority === one)) ?? 'low'
  const waiting = rows.filter((row) => needsAcknowledgement(row.state))
  const counts = order.flatMap((one) => {
    const of = rows.filter((row) => row.priority === one)
    if (of.length === 0) return []
    const isDone = of.every((row) => row.state === 'acknowledgedActive')
    return [`${of.length} ${one}${isDone ? ' acknowledged' : ''}`]
  })
  const waits = waiting.length > 0 ? `; ${waiting.length} not acknowledged` : ''
  return {
    key: name,
    title: `${name}: ${rows.length} ${rows.length === 1 ? 'alert' : 'alerts'}`,
    words: counts.join(', ') + waits,
    priority,
    state: waiting.length > 0 ? 'unacknowledgedActive' : 'acknowledgedActive',
    rows,
    together: waiting.flatMap(({ alert, priority: one }) => (alert && priorityRank[one] >= 2 ? [alert.id] : [])),
  }
}

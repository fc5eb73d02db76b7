/** The list of alerts: what is open in the order in which it is shown, what is put aside, and what was judged at all. */
import { byUrgency } from '../../../shared/alerts/order.ts'
import { isAside } from '../../../shared/alerts/transition.ts'
import type { AlertBoard, AlertView } from '../../../shared/schemas/alert.ts'
import type { LimitView, NotJudgedReason } from '../../../shared/schemas/limit.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert, Limit } from '../../models/index.ts'
import { notOutSince, notOutSql } from '../../models/notOut.ts'
import { select } from '../../models/sql.ts'
import { presentLimits } from '../limits/present.ts'
import { currentFlood } from './floodLine.ts'
import { presentAlerts } from './present.ts'

/** In words: the number of limits judged is never said without those that were not. */
const reasons: Record<NotJudgedReason, string> = {
  stale: 'its figures are stale',
  failed: 'its newest figures failed',
  noValue: 'the quantity cannot be told',
  settling: 'the program has just begun, stations are catching up',
  outOfService: 'out of service',
  neverYet: 'never judged yet',
}

function countsOf(alerts: AlertView[], limits: LimitView[]): AlertBoard['counts'] {
  const active = alerts.filter(({ state }) => state === 'unacknowledgedActive' || state === 'acknowledgedActive')
  const of = (priority: string) => active.filter((alert) => alert.priority === priority).length
  const inState = (state: string) =>
    alerts.filter((alert) => alert.state === state).length + limits.filter((limit) => limit.state === state).length
  return {
    open: active.length,
    unacknowledged: active.filter(({ state }) => state === 'unacknowledgedActive').length,
    byPriority: { low: of('low'), medium: of('medium'), high: of('high'), urgent: of('urgent') },
    cleared: alerts.length - active.length - alerts.filter(({ state }) => isAside(state)).length,
    shelved: inState('shelved'),
    suppressed: inState('suppressed'),
    outOfService: inState('outOfService'),
  }
}

async function floodOf(parts: Parts, alerts: AlertView[]): Promise<AlertBoard['flood']> {
  const flood = await currentFlood(parts)
  if (!flood) return null
  const causes = new Map<string, NonNullable<AlertBoard['flood']>['causes'][number]>()
  for (const { id, subject, isExercise } of alerts) {
    if (isExercise) continue
    const cause = causes.get(`${subject.kind}/${subject.id}`) ?? { subject, count: 0, alertIds: [] }
    causes.set(`${subject.kind}/${subject.id}`, { ...cause, count: cause.count + 1, alertIds: [...cause.alertIds, id] })
  }
  const grouped = [...causes.values()].sort((a, b) => b.count - a.count)
  return { since: new Date(flood.since).toISOString(), count: flood.count, causes: grouped }
}

async function messagesNotOut({ sequelize, clock }: Parts): Promise<AlertBoard['messagesNotOut']> {
  const [row] = await select<{ count: number | string; since: Date | null }>(
    sequelize,
    `SELECT COUNT(*) AS count, MIN(d.createdAt) AS since FROM deliveries d WHERE ${notOutSql}`,
    { notOutSince: notOutSince(clock.now()) },
  )
  return { count: Number(row?.count ?? 0), since: row?.since?.toISOString() ?? null }
}

export async function readBoard(parts: Parts): Promise<AlertBoard> {
  const open = await Alert.findAll({ where: { closedAt: null } })
  const [alerts, limits, notOut] = await Promise.all([
    presentAlerts(parts, open),
    Limit.findAll({ where: { retiredAt: null }, order: [['id', 'ASC']] }).then((rows) => presentLimits(parts, rows)),
    messagesNotOut(parts),
  ])
  const notJudged = limits.flatMap(({ id, title, notJudged: reason }) =>
    reason === null ? [] : [{ limitId: id, title, reason: reasons[reason] }],
  )
  const aside = limits.filter(({ state, openAlertId }) => isAside(state) && openAlertId === null)
  return {
    serverTime: parts.clock.now().toISOString(),
    alerts: alerts.sort(byUrgency),
    limits: aside,
    counts: countsOf(
      alerts.filter(({ isExercise }) => !isExercise),
      aside,
    ),
    judged: limits.length - notJudged.length,
    notJudged,
    pending: limits.flatMap(({ id, title, pendingSince, state }) =>
      pendingSince === null || isAside(state) ? [] : [{ limitId: id, title, since: pendingSince }],
    ),
    flood: await floodOf(parts, alerts),
    messagesNotOut: notOut,
  }
}

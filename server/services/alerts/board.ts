/** The list of alerts: what is open in the order in which it is shown, what is put aside, and what was judged at all. */
import { Op } from 'sequelize'
import { byUrgency, floodSince } from '../../../shared/alerts/order.ts'
import { isAside } from '../../../shared/alerts/transition.ts'
import type { AlertBoard, AlertView } from '../../../shared/schemas/alert.ts'
import type { LimitView } from '../../../shared/schemas/limit.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert, Limit } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { presentLimits } from '../limits/present.ts'
import { presentAlerts } from './present.ts'

const hourMs = 3_600_000

/** In words: the number of limits judged is never said without those that were not. */
const reasons: Record<string, string> = {
  stale: 'its figures are stale',
  failed: 'its newest figures failed',
  noValue: 'the quantity cannot be told',
  outOfService: 'out of service',
  neverYet: 'never judged yet',
}

interface StationAge {
  id: number
  staleAfterSeconds: number
}

/** Wave limits are judged on windows: where these stopped, they are not judged. */
async function staleLimits({ sequelize, clock }: Parts, limits: LimitView[]): Promise<Set<number>> {
  const stations = await select<StationAge>(sequelize, 'SELECT id, staleAfterSeconds FROM stations')
  const now = clock.now().getTime()
  return new Set(
    limits
      .filter(({ limitClass, subject, lastJudgedAt }) => {
        const stale = stations.find(({ id }) => id === subject.id)?.staleAfterSeconds ?? Infinity
        return limitClass === 'wave' && lastJudgedAt !== null && now - Date.parse(lastJudgedAt) > stale * 1000
      })
      .map(({ id }) => id),
  )
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
  const now = parts.clock.now().getTime()
  const rows = await Alert.findAll({
    where: { isExercise: false, announcedAt: { [Op.gt]: new Date(now - hourMs) } },
    attributes: ['announcedAt'],
    order: [['announcedAt', 'ASC']],
  })
  const since = floodSince(
    rows.flatMap(({ announcedAt }) => (announcedAt ? [announcedAt.getTime()] : [])),
    now,
  )
  if (since === null) return null
  const causes = new Map<string, NonNullable<AlertBoard['flood']>['causes'][number]>()
  for (const { id, subject, isExercise } of alerts) {
    if (isExercise) continue
    const cause = causes.get(`${subject.kind}/${subject.id}`) ?? { subject, count: 0, alertIds: [] }
    causes.set(`${subject.kind}/${subject.id}`, { ...cause, count: cause.count + 1, alertIds: [...cause.alertIds, id] })
  }
  const grouped = [...causes.values()].sort((a, b) => b.count - a.count)
  return { since: new Date(since).toISOString(), count: rows.length, causes: grouped }
}

async function messagesNotOut({ sequelize, clock }: Parts): Promise<AlertBoard['messagesNotOut']> {
  const [row] = await select<{ count: number | string; since: Date | null }>(
    sequelize,
    `SELECT COUNT(*) AS count, MIN(createdAt) AS since FROM deliveries
     WHERE state IN ('queued', 'leased') AND attempts > 0 OR state IN ('refused', 'givenUp') AND createdAt > :dayAgo`,
    { dayAgo: new Date(clock.now().getTime() - 24 * hourMs) },
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
  const stale = await staleLimits(parts, limits)
  const notJudged = limits.flatMap(({ id, title, notJudged: because }) => {
    const reason = because === null && stale.has(id) ? 'stale' : because
    return reason === null ? [] : [{ limitId: id, title, reason: reasons[reason] ?? reason }]
  })
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
    flood: await floodOf(parts, alerts),
    messagesNotOut: notOut,
  }
}

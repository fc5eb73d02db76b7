/** Alerts as the API shows them: each with the version of the limit that raised it. */
import { conditionWords, thresholdsOf, titleOf } from '../../../shared/alerts/describe.ts'
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import { alertState, condition } from '../../../shared/schemas/limit.ts'
import type { AlertView } from '../../../shared/schemas/alert.ts'
import type { Parts } from '../../config/parts.ts'
import { Limit, LimitState, LimitVersion } from '../../models/index.ts'
import type { Alert } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { namesOf, presentShelf, shelvesInForce, subjectsOf } from '../limits/present.ts'
import { fromJson } from '../limits/rows.ts'

type Counts = AlertView['deliveries']
const none: Counts = { queued: 0, accepted: 0, notOut: 0, received: 0 }

/** Not out: refused, given up, or tried without success. */
async function deliveryCounts(
  { sequelize }: Pick<Parts, 'sequelize'>,
  alertIds: number[],
): Promise<Map<number, Counts>> {
  if (alertIds.length === 0) return new Map()
  const rows = await select<{ alertId: number } & Record<keyof Counts, number | string>>(
    sequelize,
    `SELECT m.alertId, SUM(d.state IN ('queued', 'leased') AND d.attempts = 0) AS queued,
       SUM(d.state IN ('accepted', 'unknown', 'merged')) AS accepted,
       SUM(d.state IN ('refused', 'givenUp') OR (d.state IN ('queued', 'leased') AND d.attempts > 0)) AS notOut,
       SUM(d.receivedAt IS NOT NULL) AS received
     FROM deliveries d JOIN messages m ON m.id = d.messageId WHERE m.alertId IN (:alertIds) GROUP BY m.alertId`,
    { alertIds },
  )
  return new Map(
    rows.map(({ alertId, queued, accepted, notOut, received }) => [
      Number(alertId),
      { queued: Number(queued), accepted: Number(accepted), notOut: Number(notOut), received: Number(received) },
    ]),
  )
}

const iso = (date: Date | null): string | null => date?.toISOString() ?? null

/** In the order in which they were given. */
export async function presentAlerts(parts: Pick<Parts, 'sequelize' | 'clock'>, alerts: Alert[]): Promise<AlertView[]> {
  if (alerts.length === 0) return []
  const limitIds = [...new Set(alerts.map(({ limitId }) => limitId))]
  const [limits, versions, states, shelves, counts] = await Promise.all([
    Limit.findAll({ where: { id: limitIds } }),
    LimitVersion.findAll({ where: { id: [...new Set(alerts.map(({ limitVersionId }) => limitVersionId))] } }),
    LimitState.findAll({ where: { limitId: limitIds } }),
    shelvesInForce(parts, limitIds),
    deliveryCounts(
      parts,
      alerts.map(({ id }) => id),
    ),
  ])
  const subjects = await subjectsOf(limits)
  const nameOf = await namesOf([
    ...alerts.map(({ acknowledgedById }) => acknowledgedById),
    ...[...shelves.values()].flatMap(({ personId, secondPersonId }) => [personId, secondPersonId]),
  ])
  return alerts.flatMap((alert) => {
    const limit = limits.find(({ id }) => id === alert.limitId)
    const version = versions.find(({ id }) => id === alert.limitVersionId)
    const state = states.find(({ limitId }) => limitId === alert.limitId)
    if (!limit || !version) return []
    const judged = condition.parse(fromJson(version.condition))
    const { unit, toUnit, decimals, key } = quantityOf(judged.comparisons[0].quantity)
    const subject = subjects.viewOf(limit)
    const shelf = shelves.get(limit.id)
    const isOpen = alert.closedAt === null
    const isHeld = (state?.notJudged ?? null) !== null || subjects.isStale(limit, state, parts.clock.now())
    const view: AlertView = {
      ...{ id: alert.id, version: alert.version, isExercise: Boolean(alert.isExercise), limitId: limit.id },
      limitVersionNumber: version.number,
      limitClass: limit.limitClass,
      subject,
      title: titleOf(version.title, judged, subject.name),
      priority: alert.priority,
      state: alertState.parse(alert.state),
      ...{ quantity: key, unit, toUnit, decimals },
      ...thresholdsOf(judged),
      words: conditionWords(judged),
      crossedAt: alert.crossedAt.toISOString(),
      raisedAt: alert.raisedAt.toISOString(),
      announcedAt: iso(alert.announcedAt),
      windowEndsAt: alert.windowEndsAt.toISOString(),
      revision: alert.revision,
      ...{ value: alert.value, valueSd: alert.valueSd, extremeValue: alert.extremeValue },
      extremeAt: iso(alert.extremeAt),
      acknowledgedAt: iso(alert.acknowledgedAt),
      acknowledgedBy: nameOf(alert.acknowledgedById),
      clearedAt: iso(alert.clearedAt),
      closedAt: iso(alert.closedAt),
      shelf: isOpen && !alert.isExercise && shelf ? presentShelf(shelf, nameOf) : null,
      outOfServiceSince: isOpen ? iso(limit.outOfServiceAt) : null,
      isHeld: isOpen && !alert.isExercise && isHeld,
      deliveries: counts.get(alert.id) ?? none,
    }
    return [view]
  })
}

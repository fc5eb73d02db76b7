/** Drills: an exercise alert of a limit goes the whole way, marked everywhere, and counts in no statistics. */
import { titleOf, valueWords } from '../../../shared/alerts/describe.ts'
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { limitsInForce } from '../limits/rows.ts'
import { notFound, Refused } from '../problems.ts'
import { writeSystemLine } from '../watchLog.ts'
import { atDesk } from './desk.ts'
import { addEvent } from './lifecycle.ts'
import type { Office } from './office.ts'
import { announce, endSteps, tellAllClear } from './tell.ts'

export interface DrillOrder {
  limitId: number
  value: number
  note: string
  personId: number
}

/** Answers the alert's number. One drill a limit at a time. */
export const beginDrill = (
  parts: Parts,
  office: Office,
  { limitId, value, note, personId }: DrillOrder,
): Promise<number> =>
  atDesk(parts, office, async (desk) => {
    const { transaction } = desk
    const [limit] = await limitsInForce(parts.sequelize, 'l.id = :limitId', { limitId }, transaction)
    if (!limit) throw notFound('limit', limitId)
    if (await Alert.findOne({ where: { limitId, isExercise: true, closedAt: null }, lock: true, transaction })) {
      const detail = 'A drill of this limit is under way: end it first.'
      throw new Refused({ status: 409, code: 'drill.underWay', title: 'Already under way', detail })
    }
    const now = new Date(desk.now)
    const alert = await Alert.create(
      {
        ...{ limitId, limitVersionId: limit.versionId, state: 'unacknowledgedActive', priority: limit.priority },
        ...{ crossedAt: now, raisedAt: now, announcedAt: now, windowEndsAt: now, revision: 0, isExercise: true },
        ...{ value, valueSd: null, extremeValue: value, extremeAt: now },
        ...{ acknowledgedAt: null, acknowledgedById: null, clearedAt: null, closedAt: null },
      },
      { transaction },
    )
    const quantity = quantityOf(limit.condition.comparisons[0].quantity)
    const text = `EXERCISE: raised at ${valueWords(quantity, value)}`
    await addEvent(desk, alert.id, { kind: 'raised', text, personId, note, value })
    await announce(desk, { alert, limit, sea: null, isCaughtUp: false })
    const line = `EXERCISE: ${titleOf(limit.title, limit.condition, limit.subjectName)}. ${note}`
    await writeSystemLine(parts, { kind: 'drill', text: line, links: { alertId: alert.id, limitId } }, transaction)
    const audit = { action: 'drill.begin', entity: 'alert', entityId: alert.id }
    await recordAudit(parts, { ...audit, personId, after: { limitId, value, note } }, transaction)
    return alert.id
  })

export const endDrill = (parts: Parts, office: Office, alertId: number, personId: number): Promise<void> =>
  atDesk(parts, office, async (desk) => {
    const { transaction } = desk
    const alert = await Alert.findByPk(alertId, { lock: true, transaction })
    if (!alert?.isExercise) throw notFound('drill', alertId)
    if (alert.closedAt !== null) return
    const now = new Date(desk.now)
    await alert.update({ state: 'normal', clearedAt: now, closedAt: now, version: alert.version + 1 }, { transaction })
    await addEvent(desk, alertId, { kind: 'closed', text: 'EXERCISE: ended', personId })
    await endSteps(desk, alertId, true)
    const [limit] = await limitsInForce(parts.sequelize, 'l.id = :limitId', { limitId: alert.limitId }, transaction)
    if (limit) await tellAllClear(desk, { alert, limit, sea: null })
    await writeSystemLine(parts, { kind: 'drill', text: 'EXERCISE: ended', links: { alertId } }, transaction)
    await recordAudit(parts, { personId, action: 'drill.end', entity: 'alert', entityId: alertId }, transaction)
  })

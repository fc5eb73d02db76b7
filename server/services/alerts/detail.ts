/** One alert with its timeline, who was told, what comes next, and its quantity over the last hours. */
import type { z } from 'zod'
import { thresholdsOf, valueWords } from '../../../shared/alerts/describe.ts'
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import { alertEventKind } from '../../../shared/schemas/alert.ts'
import type { AlertHistory, AlertView, alertDetail } from '../../../shared/schemas/alert.ts'
import { condition, recipients } from '../../../shared/schemas/limit.ts'
import type { Condition } from '../../../shared/schemas/limit.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert, AlertEvent, DistributionList, Escalation, Limit, LimitVersion } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { namesOf, presentLimits } from '../limits/present.ts'
import { fromJson } from '../limits/rows.ts'
import { notFound } from '../problems.ts'
import type { Office } from './office.ts'
import { presentAlerts } from './present.ts'
import { quantityBetween } from './quantityHistory.ts'

type Detail = z.input<typeof alertDetail>

async function alertOf(alertId: number): Promise<Alert> {
  const alert = await Alert.findByPk(alertId)
  if (!alert) throw notFound('alert', alertId)
  return alert
}

/** Throws the 404. */
export async function readAlert(parts: Parts, alertId: number): Promise<AlertView> {
  const [view] = await presentAlerts(parts, [await alertOf(alertId)])
  if (!view) throw notFound('alert', alertId)
  return view
}

async function timelineOf(view: AlertView): Promise<Detail['timeline']> {
  const rows = await AlertEvent.findAll({ where: { alertId: view.id }, order: [['id', 'ASC']] })
  const nameOf = await namesOf(rows.map(({ personId }) => personId))
  const events = rows.map(({ id, at, kind, text, personId, note, value }) => ({
    ...{ id, at: at.toISOString(), kind: alertEventKind.parse(kind), text, by: nameOf(personId), note, value },
  }))
  const quantity = quantityOf(view.quantity)
  if (view.extremeAt !== null && view.extremeValue !== null && view.extremeAt > view.raisedAt && !quantity.isCircular) {
    const text = `${view.clearedAt === null ? 'Furthest so far' : 'Furthest'}: ${valueWords(quantity, view.extremeValue)}`
    const extreme = { id: 0, at: view.extremeAt, kind: 'extreme' as const, text, by: null, note: null }
    events.push({ ...extreme, value: view.extremeValue })
  }
  return events.sort((a, b) => Date.parse(b.at) - Date.parse(a.at) || b.id - a.id)
}

interface ToldRow {
  id: number
  messageId: number
  personId: number
  name: string
  state: Detail['told'][number]['deliveries'][number]['state']
  attempts: number
  standsInFor: string | null
  nextAttemptAt: Date | null
  acceptedAt: Date | null
  receivedAt: Date | null
}

async function toldOf({ sequelize }: Parts, alertId: number): Promise<Detail['told']> {
  const rows = await select<ToldRow>(
    sequelize,
    `SELECT d.id, d.messageId, d.personId, p.name, d.state, d.attempts, d.standsInFor, d.nextAttemptAt, d.acceptedAt, d.receivedAt
     FROM deliveries d JOIN messages m ON m.id = d.messageId JOIN people p ON p.id = d.personId
     WHERE m.alertId = :alertId ORDER BY d.id`,
    { alertId },
  )
  const people = new Map<number, Detail['told'][number]>()
  for (const { personId, name, receivedAt, ...delivery } of rows) {
    const told = people.get(personId) ?? { personId, name, deliveries: [], receivedAt: null }
    people.set(personId, told)
    told.deliveries.push({
      ...{ id: Number(delivery.id), messageId: Number(delivery.messageId), state: delivery.state },
      attempts: delivery.attempts,
      standsInFor: delivery.standsInFor,
      nextAttemptAt: delivery.nextAttemptAt?.toISOString() ?? null,
      acceptedAt: delivery.acceptedAt?.toISOString() ?? null,
    })
    if (receivedAt && told.receivedAt === null) told.receivedAt = receivedAt.toISOString()
  }
  return [...people.values()]
}

/** From the escalation's own stored times. */
async function nextStepOf(alert: Alert): Promise<Detail['nextStep']> {
  const where = { alertId: alert.id, sentAt: null, satisfiedAt: null, endedAt: null }
  const next = await Escalation.findOne({ where, order: [['dueAt', 'ASC']] })
  const version = next && (await LimitVersion.findByPk(alert.limitVersionId))
  if (!next || !version) return null
  const ids = recipients.parse(fromJson(version.steps)).steps[next.step]?.listIds ?? []
  const lists = await DistributionList.findAll({ where: { id: ids }, order: [['id', 'ASC']] })
  return { at: next.dueAt.toISOString(), step: next.step, lists: lists.map(({ name }) => name) }
}

export async function readAlertDetail(parts: Parts, office: Office, alertId: number): Promise<Detail> {
  const alert = await alertOf(alertId)
  const [[view], limit] = await Promise.all([presentAlerts(parts, [alert]), Limit.findByPk(alert.limitId)])
  const [limitShown] = limit ? await presentLimits(parts, [limit]) : []
  if (!view || !limitShown) throw notFound('alert', alertId)
  const [timeline, told, nextStep] = await Promise.all([timelineOf(view), toldOf(parts, alertId), nextStepOf(alert)])
  return { ...view, limit: limitShown, timeline, told, nextStep, caution: office.caution }
}

async function conditionOf(alert: Alert): Promise<Condition> {
  const version = await LimitVersion.findByPk(alert.limitVersionId)
  if (!version) throw notFound('alert', alert.id)
  return condition.parse(fromJson(version.condition))
}

/** The quantity of the first comparison; data health has none, and neither has an exercise. */
export async function readAlertHistory(parts: Parts, alertId: number, hours: number): Promise<AlertHistory> {
  const alert = await alertOf(alertId)
  const judged = await conditionOf(alert)
  const quantity = quantityOf(judged.comparisons[0].quantity)
  const limit = await Limit.findByPk(alert.limitId)
  const to = (alert.closedAt ?? parts.clock.now()).getTime()
  const found = limit ? await quantityBetween(parts.sequelize, limit, quantity, to - hours * 3_600_000, to) : []
  const points = found.map(({ at, ...point }) => ({ at: new Date(at).toISOString(), ...point }))
  return { quantity: quantity.key, ...thresholdsOf(judged), points }
}

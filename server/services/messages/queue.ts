/** From a message written with an alert to one e-mail for each person. A stop in between is made good by the next run. */
import type { Transaction } from 'sequelize'
import { messageKind } from '../../../shared/schemas/message.ts'
import { recipients as recipientsShape } from '../../../shared/schemas/limit.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert, AlertEvent, LimitVersion, Message } from '../../models/index.ts'
import { execute, select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'
import { writeSystemLine } from '../watchLog.ts'
import { announcedSince } from './announced.ts'
import { holdInFlood } from './flood.ts'
import { membersOf, reachablePeople } from './people.ts'
import { chooseRecipients } from './recipients.ts'
import { addDeliveries } from './write.ts'
import type { Recipient } from './write.ts'

/** Answers how many messages were queued. `timeZone`: the port's, in which all hours are kept. */
export async function queueMessages(parts: Parts, timeZone: string): Promise<number> {
  for (let count = 0; ; count += 1) {
    const message = await inTransaction(parts.sequelize, (transaction) => queueNext(parts, timeZone, transaction))
    if (!message) return count
    parts.bus.publish('message.changed', { messageId: message.id, alertId: message.alertId })
  }
}

async function queueNext(parts: Parts, timeZone: string, transaction: Transaction): Promise<Message | null> {
  const [next] = await select<{ id: number }>(
    parts.sequelize,
    // A first step that is not to be taken at once has its message written and its time stored.
    `SELECT id FROM messages WHERE queuedAt IS NULL AND NOT (kind = 'alert' AND EXISTS (
       SELECT 1 FROM escalations e WHERE e.alertId = messages.alertId AND e.step = messages.step AND e.sentAt IS NULL))
     ORDER BY id LIMIT 1 FOR UPDATE SKIP LOCKED`,
    {},
    transaction,
  )
  const message = next ? await Message.findByPk(next.id, { transaction }) : null
  if (!message) return null
  const alert = message.alertId === null ? null : await Alert.findByPk(message.alertId, { transaction })
  const { recipients, unreached, isNobody } = alert
    ? await chosenFor(parts, message, alert, timeZone, transaction)
    : nobody
  const held =
    alert && !message.isExercise ? await holdInFlood(parts, recipients, alert.priority, transaction) : recipients
  await addDeliveries(parts, message.id, held, transaction)
  await message.update({ queuedAt: parts.clock.now() }, { transaction })
  if (alert) await tell(parts, message, alert, { count: recipients.length, unreached, isNobody }, transaction)
  return message
}

interface Choice {
  recipients: Recipient[]
  unreached: string[]
  /** The step's lists have nobody to tell now; not so where all of them were told before. */
  isNobody: boolean
}

const nobody: Choice = { recipients: [], unreached: [], isNobody: true }

async function chosenFor(
  parts: Parts,
  message: Message,
  alert: Alert,
  timeZone: string,
  transaction: Transaction,
): Promise<Choice> {
  if (message.kind === 'allClear') return { ...nobody, recipients: await toldOf(parts, alert.id, transaction) }
  if (message.kind === 'reminder') {
    return { ...nobody, recipients: await withoutReceipt(parts, alert.id, message.step ?? 0, transaction) }
  }
  const version = await LimitVersion.findByPk(alert.limitVersionId, { transaction })
  const step = recipientsShape.parse(version?.steps).steps.at(message.step ?? 0)
  if (!step) return nobody
  const at = parts.clock.now()
  const members = await membersOf(step.listIds, transaction)
  const people = await reachablePeople(at, transaction)
  const chosen = chooseRecipients({ members, people, priority: alert.priority, at: at.getTime(), timeZone })
  // Over all steps each person is told of an alert once; after that they are reminded.
  const told = await toldBefore(parts, alert.id, transaction)
  return {
    unreached: chosen.unreached,
    isNobody: chosen.recipients.length === 0,
    recipients: chosen.recipients.filter(({ personId }) => !told.has(personId)),
  }
}

async function toldBefore({ sequelize }: Parts, alertId: number, transaction: Transaction): Promise<Set<number>> {
  const rows = await select<{ personId: number }>(
    sequelize,
    `SELECT DISTINCT d.personId FROM deliveries d JOIN messages m ON m.id = d.messageId
     WHERE m.alertId = :alertId AND m.kind IN ('alert', 'escalation') AND d.createdAt >= :since`,
    { alertId, since: await announcedSince(sequelize, alertId, transaction) },
    transaction,
  )
  return new Set(rows.map(({ personId }) => personId))
}

const toldOf = ({ sequelize }: Parts, alertId: number, transaction: Transaction): Promise<Recipient[]> =>
  select(
    sequelize,
    `SELECT DISTINCT p.id AS personId, p.email AS address
     FROM deliveries d JOIN messages m ON m.id = d.messageId JOIN people p ON p.id = d.personId
     WHERE m.alertId = :alertId AND m.kind IN ('alert', 'escalation')
       AND p.email IS NOT NULL AND p.disabledAt IS NULL ORDER BY p.id`,
    { alertId },
    transaction,
  )

/** Nobody is reminded of an e-mail that is not out yet. */
async function withoutReceipt(
  { sequelize }: Parts,
  alertId: number,
  step: number,
  transaction: Transaction,
): Promise<Recipient[]> {
  const since = await announcedSince(sequelize, alertId, transaction)
  return select(
    sequelize,
    `SELECT p.id AS personId, p.email AS address
     FROM deliveries d JOIN messages m ON m.id = d.messageId JOIN people p ON p.id = d.personId
     WHERE m.alertId = :alertId AND d.createdAt >= :since AND p.email IS NOT NULL AND p.disabledAt IS NULL
     GROUP BY p.id, p.email
     HAVING MAX(d.receivedAt) IS NULL
        AND SUM(COALESCE(m.step, 0) = :step AND m.kind IN ('alert', 'escalation')
                AND d.state IN ('accepted', 'merged', 'unknown')) > 0
     ORDER BY p.id`,
    { alertId, step, since },
    transaction,
  )
}

const people = (count: number): string => (count === 1 ? '1 person' : `${count} people`)

/** The timeline and, where nobody could be told, the watch log; then the next step comes at once. */
async function tell(
  parts: Parts,
  message: Message,
  alert: Alert,
  { count, unreached, isNobody }: { count: number; unreached: string[]; isNobody: boolean },
  transaction: Transaction,
): Promise<void> {
  const step = message.step ?? 0
  const kind = messageKind.parse(message.kind)
  const sentences: Partial<Record<typeof kind, string>> = {
    alert: `E-mail to ${people(count)}.`,
    escalation: `No receipt confirmed: step ${step + 1}, e-mail to ${people(count)}.`,
    reminder: `Reminder to ${people(count)} without a receipt.`,
    allClear: `All-clear e-mail to ${people(count)}.`,
  }
  const missed = unreached.length === 0 ? '' : ` Not reachable: ${unreached.join(', ')}.`
  const text = `${sentences[kind] ?? `E-mail to ${people(count)}.`}${missed}`.slice(0, 400)
  const eventKind = kind === 'escalation' ? 'escalated' : 'message'
  await AlertEvent.create({ alertId: alert.id, at: parts.clock.now(), kind: eventKind, text }, { transaction })
  if ((kind !== 'alert' && kind !== 'escalation') || (!isNobody && unreached.length === 0)) return
  const mark = alert.isExercise ? 'EXERCISE. ' : ''
  const line = isNobody
    ? `${mark}Alert ${alert.id}, step ${step + 1}: nobody could be told by e-mail.${missed}`
    : `${mark}Alert ${alert.id}: not everybody could be told.${missed}`
  await writeSystemLine(parts, { kind: 'message', text: line, links: { alertId: alert.id } }, transaction)
  if (!isNobody) return
  await execute(
    parts.sequelize,
    `UPDATE escalations SET dueAt = LEAST(dueAt, :now)
     WHERE alertId = :alertId AND step > :step AND sentAt IS NULL AND endedAt IS NULL ORDER BY step LIMIT 1`,
    { now: parts.clock.now(), alertId: alert.id, step },
    transaction,
  )
}

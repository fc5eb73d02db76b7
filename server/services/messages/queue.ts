/** From a message written with an alert to one e-mail for each person. A stop in between is made good by the next run. */
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { messageKind } from '../../../shared/schemas/message.ts'
import { recipients as recipientsShape } from '../../../shared/schemas/limit.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert, AlertEvent, LimitVersion, Message, Person } from '../../models/index.ts'
import { execute, select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'
import { writeSystemLine } from '../watchLog.ts'
import { announcedSince } from './announced.ts'
import { holdInFlood } from './flood.ts'
import { membersOf, reachablePeople } from './people.ts'
import { chooseRecipients } from './recipients.ts'
import type { Reachable } from './recipients.ts'
import { addDeliveries } from './write.ts'
import type { Recipient } from './write.ts'

const atOnce = 20

/**
 * Answers how many messages were queued; fewer than `most` when none is left. `timeZone`: the port's, in which all
 * hours are kept.
 */
export async function queueMessages(parts: Parts, timeZone: string, most = Infinity): Promise<number> {
  let count = 0
  for (;;) {
    const queued = await inTransaction(parts.sequelize, (transaction) => queueSome(parts, timeZone, transaction))
    for (const { id, alertId } of queued) parts.bus.publish('message.changed', { messageId: id, alertId })
    count += queued.length
    if (queued.length === 0 || count >= most) return count
  }
}

async function queueSome(parts: Parts, timeZone: string, transaction: Transaction): Promise<Message[]> {
  const messages = await lockSome(parts, transaction)
  const people = messages.length > 0 ? await reachablePeople(parts.clock.now(), transaction) : new Map()
  for (const message of messages) await queueOne(parts, message, { timeZone, people }, transaction)
  return messages
}

/** The most serious first; of one alert in the order of their writing. */
async function lockSome({ sequelize }: Parts, transaction: Transaction): Promise<Message[]> {
  const waiting = await select<{ id: number }>(
    sequelize,
    // A first step that is not to be taken at once has its message written and its time stored.
    `SELECT m.id FROM messages m LEFT JOIN alerts a ON a.id = m.alertId
     WHERE m.queuedAt IS NULL AND NOT (m.kind = 'alert' AND EXISTS (
       SELECT 1 FROM escalations e WHERE e.alertId = m.alertId AND e.step = m.step AND e.sentAt IS NULL))
     ORDER BY a.priority + 0 DESC, m.id LIMIT :atOnce`,
    { atOnce },
    transaction,
  )
  if (waiting.length === 0) return []
  const order = waiting.map(({ id }) => id)
  const locked = await select<{ id: number }>(
    sequelize,
    'SELECT id FROM messages WHERE id IN (:order) AND queuedAt IS NULL FOR UPDATE SKIP LOCKED',
    { order },
    transaction,
  )
  const messages = await Message.findAll({ where: { id: locked.map(({ id }) => id) }, transaction })
  return messages.sort((one, other) => order.indexOf(one.id) - order.indexOf(other.id))
}

interface Around {
  timeZone: string
  people: Map<number, Reachable>
}

async function queueOne(parts: Parts, message: Message, around: Around, transaction: Transaction): Promise<void> {
  const alert = message.alertId === null ? null : await Alert.findByPk(message.alertId, { transaction })
  const { recipients, unreached, isNobody } = alert
    ? await chosenFor(parts, message, alert, around, transaction)
    : message.kind === 'alone'
      ? { ...nobody, recipients: await administrators(transaction) }
      : nobody
  const held =
    alert && !message.isExercise ? await holdInFlood(parts, recipients, alert.priority, transaction) : recipients
  await addDeliveries(parts, message.id, held, transaction)
  await message.update({ queuedAt: parts.clock.now() }, { transaction })
  if (alert) await tell(parts, message, alert, { count: recipients.length, unreached, isNobody }, transaction)
}

interface Choice {
  recipients: Recipient[]
  unreached: string[]
  /** The step's lists have nobody to tell now; not so where all of them were told before. */
  isNobody: boolean
}

async function administrators(transaction: Transaction): Promise<Recipient[]> {
  const where = { role: 'admin', disabledAt: null, email: { [Op.ne]: null } } as const
  const found = await Person.findAll({ where, order: [['id', 'ASC']], transaction })
  return found.flatMap(({ id, email }) => (email === null ? [] : [{ personId: id, address: email }]))
}

const nobody: Choice = { recipients: [], unreached: [], isNobody: true }

async function chosenFor(
  parts: Parts,
  message: Message,
  alert: Alert,
  { timeZone, people }: Around,
  transaction: Transaction,
): Promise<Choice> {
  if (message.kind === 'allClear') return { ...nobody, recipients: await toldOf(parts, alert.id, transaction) }
  if (message.kind === 'reminder') {
    return { ...nobody, recipients: await withoutReceipt(parts, alert.id, message.step ?? 0, transaction) }
  }
  const version = await LimitVersion.findByPk(alert.limitVersionId, { transaction })
  const step = recipientsShape.parse(version?.steps).steps.at(message.step ?? 0)
  if (!step) return nobody
  const members = await membersOf(step.listIds, transaction)
  const chosen = chooseRecipients({
    members,
    people,
    priority: alert.priority,
    at: parts.clock.now().getTime(),
    timeZone,
  })
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

interface ToldRow {
  personId: number
  address: string
  standsInFor: string | null
}

/** Who was told for somebody else is told on for them. */
const toldAgain = (rows: ToldRow[]): Recipient[] =>
  rows.map(({ standsInFor, ...recipient }) => ({
    ...recipient,
    standsInFor: standsInFor === null ? [] : [standsInFor],
  }))

const toldOf = async ({ sequelize }: Parts, alertId: number, transaction: Transaction): Promise<Recipient[]> => {
  const rows = await select<ToldRow>(
    sequelize,
    `SELECT p.id AS personId, p.email AS address, MAX(d.standsInFor) AS standsInFor
     FROM deliveries d JOIN messages m ON m.id = d.messageId JOIN people p ON p.id = d.personId
     WHERE m.alertId = :alertId AND m.kind IN ('alert', 'escalation')
       AND p.email IS NOT NULL AND p.disabledAt IS NULL GROUP BY p.id, p.email ORDER BY p.id`,
    { alertId },
    transaction,
  )
  return toldAgain(rows)
}

/** Nobody is reminded of an e-mail that is not out yet. */
async function withoutReceipt(
  { sequelize }: Parts,
  alertId: number,
  step: number,
  transaction: Transaction,
): Promise<Recipient[]> {
  const since = await announcedSince(sequelize, alertId, transaction)
  const rows = await select<ToldRow>(
    sequelize,
    `SELECT p.id AS personId, p.email AS address, MAX(d.standsInFor) AS standsInFor
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
  return toldAgain(rows)
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

/**
 * The word of a person that an e-mail has reached them. Opening the link shows and records nothing, for programs open
 * links too; the button does. It stops that person's reminders and meets their step of the escalation. It never
 * acknowledges the alert: the watch does that.
 */
import type { Transaction } from 'sequelize'
import { stateWords } from '../../shared/alerts/describe.ts'
import { priority } from '../../shared/schemas/limit.ts'
import { messageContent } from '../../shared/schemas/message.ts'
import type { MessageContent, ReceiptView } from '../../shared/schemas/message.ts'
import type { Parts } from '../config/parts.ts'
import { Alert, AlertEvent, Delivery, LinkToken, Message, Person } from '../models/index.ts'
import { execute, select } from '../models/sql.ts'
import { recordAudit } from './audit.ts'
import { notFound, Refused } from './problems.ts'
import { hashOfToken, isSignedReceipt } from './receipts/token.ts'
import { inTransaction } from './transaction.ts'
import { writeSystemLine } from './watchLog.ts'

export { issueReceiptToken } from './receipts/issue.ts'

/** Without what the office has set, which the door adds. */
type Receipt = Omit<ReceiptView, 'emergencyLine'>

interface Link {
  row: LinkToken
  person: Person
  delivery: Delivery
  message: Message
  /** What the e-mail brings: in a flood several, most serious first. */
  news: News[]
}

interface News {
  alert: Alert
  /** As it was written for this alert. */
  content: MessageContent | null
}

/** Changes nothing. */
export async function showReceipt(parts: Parts, token: string): Promise<Receipt> {
  return present(parts, await linkOf(parts, token))
}

/** Once; asked again it answers the same. */
export async function confirmReceipt(parts: Parts, token: string): Promise<Receipt> {
  const alertIds = await inTransaction(parts.sequelize, async (transaction) => {
    const link = await linkOf(parts, token, transaction)
    if (link.row.usedAt) return []
    const now = parts.clock.now()
    if (link.row.expiresAt <= now) throw expired()
    await link.row.update({ usedAt: now }, { transaction })
    for (const { alert } of link.news) await markReceived(parts, link, alert.id, now, transaction)
    await link.delivery.update({ receivedAt: now }, { transaction })
    await writeDown(parts, link, now, transaction)
    return link.news.map(({ alert }) => alert.id)
  })
  const link = await linkOf(parts, token)
  for (const alertId of alertIds) parts.bus.publish('message.changed', { messageId: link.message.id, alertId })
  return present(parts, link)
}

async function linkOf(parts: Parts, token: string, transaction?: Transaction): Promise<Link> {
  if (!isSignedReceipt(parts.environment.jwtSecret, token)) throw unknownLink()
  const within = transaction && { transaction }
  const where = { tokenHash: hashOfToken(token), kind: 'receipt' as const }
  const row = await LinkToken.findOne({ where, ...within, ...(transaction && { lock: true }) })
  const delivery = row?.subjectId ? await Delivery.findByPk(row.subjectId, within) : null
  const [message, person] = await Promise.all([
    delivery && Message.findByPk(delivery.messageId, within),
    delivery && Person.findByPk(delivery.personId, within),
  ])
  if (!row || !delivery || !message || !person) throw unknownLink()
  return { row, delivery, message, person, news: await newsOf(parts, message, person.id, transaction) }
}

async function newsOf(
  { sequelize }: Parts,
  message: Message,
  personId: number,
  transaction?: Transaction,
): Promise<News[]> {
  const within = transaction && { transaction }
  if (message.alertId !== null) {
    const alert = await Alert.findByPk(message.alertId, within)
    return alert ? [{ alert, content: message.content }] : []
  }
  const rows = await select<{ alertId: number; messageId: number }>(
    sequelize,
    `SELECT m.alertId, MAX(m.id) AS messageId FROM deliveries d JOIN messages m ON m.id = d.messageId
     WHERE d.rootMessageId = :root AND d.personId = :personId AND m.alertId IS NOT NULL GROUP BY m.alertId`,
    { root: message.id, personId },
    transaction,
  )
  const [alerts, messages] = await Promise.all([
    Alert.findAll({ where: { id: rows.map(({ alertId }) => alertId) }, ...within }),
    Message.findAll({ where: { id: rows.map(({ messageId }) => messageId) }, ...within }),
  ])
  const first = messageContent.shape.path.catch('').parse(message.content?.path)
  const rank = ({ id, priority: of }: Alert): number => (first === `/alerts/${id}` ? 10 : priority.options.indexOf(of))
  return alerts
    .sort((a, b) => rank(b) - rank(a) || b.id - a.id)
    .map((alert) => ({ alert, content: messages.find(({ alertId }) => alertId === alert.id)?.content ?? null }))
}

/** Of everything that this person got about the alert; their steps are met, and those not yet sent are not needed. */
async function markReceived(
  { sequelize }: Parts,
  { person }: Link,
  alertId: number,
  now: Date,
  transaction: Transaction,
): Promise<void> {
  const values = { now, alertId, personId: person.id }
  await execute(
    sequelize,
    `UPDATE deliveries d JOIN messages m ON m.id = d.messageId SET d.receivedAt = :now
     WHERE m.alertId = :alertId AND d.personId = :personId AND d.receivedAt IS NULL`,
    values,
    transaction,
  )
  await execute(
    sequelize,
    `UPDATE escalations SET satisfiedAt = :now, satisfiedById = :personId
     WHERE alertId = :alertId AND satisfiedAt IS NULL AND step IN (
       SELECT COALESCE(m.step, 0) FROM deliveries d JOIN messages m ON m.id = d.messageId
       WHERE m.alertId = :alertId AND d.personId = :personId AND m.kind IN ('alert', 'escalation'))`,
    values,
    transaction,
  )
  await execute(
    sequelize,
    'UPDATE escalations SET endedAt = :now WHERE alertId = :alertId AND sentAt IS NULL AND endedAt IS NULL',
    values,
    transaction,
  )
}

async function writeDown(
  parts: Parts,
  { person, delivery, news }: Link,
  now: Date,
  transaction: Transaction,
): Promise<void> {
  const text = `Receipt confirmed by ${person.name}.`
  for (const { id, isExercise } of news.map(({ alert }) => alert)) {
    const event = { alertId: id, at: now, kind: 'receipt' as const, personId: person.id, text }
    await AlertEvent.create(event, { transaction })
    const mark = isExercise ? 'EXERCISE. ' : ''
    const line = `${mark}Receipt of alert ${id} confirmed by ${person.name}.`
    await writeSystemLine(parts, { kind: 'message', text: line, links: { alertId: id } }, transaction)
  }
  const change = { action: 'receipt.confirm', entity: 'delivery', entityId: delivery.id }
  await recordAudit(parts, { ...change, personId: person.id, after: { receivedAt: now.toISOString() } }, transaction)
}

async function present(parts: Parts, { row, person, message, news }: Link): Promise<Receipt> {
  const [first, ...others] = news
  if (!first || !message.content) throw unknownLink()
  const ids = news.flatMap(({ alert }) => alert.acknowledgedById ?? [])
  const officers = await Person.findAll({ where: { id: ids }, attributes: ['id', 'name'] })
  const standing = (alert: Alert) => ({
    id: alert.id,
    state: alert.state,
    stateWords: stateWords[alert.closedAt ? 'normal' : alert.state],
    acknowledgedAt: alert.acknowledgedAt?.toISOString() ?? null,
    acknowledgedBy: officers.find(({ id }) => id === alert.acknowledgedById)?.name ?? null,
    closedAt: alert.closedAt?.toISOString() ?? null,
  })
  return {
    person: person.name,
    portName: message.content.portName,
    isExercise: message.isExercise,
    isDemonstration: parts.environment.installationKind === 'demonstration',
    expiresAt: row.expiresAt.toISOString(),
    isExpired: row.expiresAt <= parts.clock.now(),
    confirmedAt: row.usedAt?.toISOString() ?? null,
    content: message.content,
    alert: standing(first.alert),
    others: others.map(({ alert, content }) => ({
      ...standing(alert),
      priority: alert.priority,
      title: content?.title ?? `Alert ${alert.id}`,
      value: content?.value ?? '',
      when: content?.when ?? '',
    })),
  }
}

const unknownLink = (): Refused => notFound('receipt', 'behind this link')

const expired = (): Refused =>
  new Refused({
    status: 410,
    code: 'receipt.expired',
    title: 'The link has ended',
    detail: 'It is older than a day. Nothing was recorded; tell the harbour watch by telephone.',
  })

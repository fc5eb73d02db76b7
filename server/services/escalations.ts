/** Who is told next when nobody has confirmed: all times are stored, so that a stop loses none. */
import type { Transaction } from 'sequelize'
import { messageTextOf, subjectLineOf } from '../../shared/alerts/messageText.ts'
import type { AlertState, Recipients } from '../../shared/schemas/limit.ts'
import { recipients } from '../../shared/schemas/limit.ts'
import { messageContent } from '../../shared/schemas/message.ts'
import type { Parts } from '../config/parts.ts'
import { Alert, Escalation, LimitVersion, Message } from '../models/index.ts'
import { execute, select } from '../models/sql.ts'
import { announcedSince, writeMessage } from './messages.ts'
import { inTransaction } from './transaction.ts'

/** Nobody need be told more of an alert in these states; while it is put aside its times stand still. */
const over: AlertState[] = ['returnedUnacknowledged', 'latchedUnacknowledged', 'latchedAcknowledged', 'normal']
const mostAtOnce = 500

/** As long as the link in the first e-mail lives. */
const remindForMs = 24 * 3_600_000

/** Sends the steps and reminders whose time has come; answers how many e-mails were written down. */
export async function escalateDue(parts: Parts): Promise<number> {
  await endOver(parts)
  const due = await select<{ alertId: number; step: number }>(
    parts.sequelize,
    // A time further ahead than it was ever put off was stored before the server's clock was set back.
    `SELECT e.alertId, e.step FROM escalations e JOIN alerts a ON a.id = e.alertId
       JOIN limitVersions v ON v.id = a.limitVersionId
     WHERE e.endedAt IS NULL AND (
       e.sentAt IS NULL AND (e.dueAt <= :now
         OR e.dueAt > :now + INTERVAL JSON_VALUE(v.steps, CONCAT('$.steps[', e.step, '].afterSeconds')) SECOND)
       OR e.nextReminderAt <= :now
       OR e.nextReminderAt > :now + INTERVAL JSON_VALUE(v.steps, '$.remindEverySeconds') SECOND)
     ORDER BY e.dueAt, e.alertId, e.step LIMIT :most`,
    { now: parts.clock.now(), most: mostAtOnce },
  )
  let written = 0
  for (const one of due) {
    const messageId = await inTransaction(parts.sequelize, (transaction) => escalateOne(parts, one, transaction))
    if (messageId === null) continue
    written += 1
    parts.bus.publish('message.changed', { messageId, alertId: one.alertId })
  }
  return written
}

/** An operator's acknowledgement ends the steps to come, not the reminders of those who were told. */
const endOver = ({ sequelize, clock }: Parts): Promise<number> =>
  execute(
    sequelize,
    `UPDATE escalations e JOIN alerts a ON a.id = e.alertId SET e.endedAt = :now
     WHERE e.endedAt IS NULL AND (a.closedAt IS NOT NULL OR a.state IN (:over)
       OR a.state = 'acknowledgedActive' AND e.sentAt IS NULL)`,
    { now: clock.now(), over },
  )

async function escalateOne(
  parts: Parts,
  { alertId, step }: { alertId: number; step: number },
  transaction: Transaction,
): Promise<number | null> {
  const row = await Escalation.findOne({ where: { alertId, step }, lock: true, transaction })
  const alert = await Alert.findByPk(alertId, { transaction })
  if (!row || !alert || row.endedAt || alert.closedAt) return null
  const isToBeTold = alert.state === 'unacknowledgedActive' || (row.sentAt && alert.state === 'acknowledgedActive')
  if (!isToBeTold) return null
  return row.sentAt ? remind(parts, row, alert, transaction) : takeStep(parts, row, alert, transaction)
}

async function orderOf(alert: Alert, transaction: Transaction): Promise<Recipients> {
  const version = await LimitVersion.findByPk(alert.limitVersionId, { transaction })
  return recipients.parse(version?.steps)
}

const reminderAfter = ({ clock }: Parts, { remindEverySeconds }: Recipients): Date | null =>
  remindEverySeconds === null ? null : new Date(clock.now().getTime() + remindEverySeconds * 1000)

async function takeStep(parts: Parts, row: Escalation, alert: Alert, transaction: Transaction): Promise<number | null> {
  const now = parts.clock.now()
  const order = await orderOf(alert, transaction)
  const nextReminderAt = reminderAfter(parts, order)
  await row.update({ sentAt: now, nextReminderAt }, { transaction })
  const since = await announcedSince(parts.sequelize, alert.id, transaction)
  const known = await Message.findOne({
    where: { alertId: alert.id, kind: ['alert', 'escalation'], step: row.step },
    order: [['id', 'DESC']],
    transaction,
  })
  // The first step was written with the alert itself.
  if (known && known.createdAt >= since) return null
  const isAtOnce = order.steps.at(row.step)?.afterSeconds === 0
  return write(parts, isAtOnce ? 'alert' : 'escalation', row, alert, transaction)
}

async function remind(parts: Parts, row: Escalation, alert: Alert, transaction: Transaction): Promise<number | null> {
  const now = parts.clock.now()
  const isOver = row.sentAt !== null && now.getTime() - row.sentAt.getTime() >= remindForMs
  const [waiting] = await select<{ told: number; onTheWay: number }>(
    parts.sequelize,
    `SELECT COUNT(IF(isTold, 1, NULL)) AS told, COUNT(IF(isOnTheWay, 1, NULL)) AS onTheWay FROM (
       SELECT MAX(d.state IN ('accepted', 'merged', 'unknown')) AS isTold,
              MAX(d.state IN ('queued', 'leased')) AS isOnTheWay
       FROM deliveries d JOIN messages m ON m.id = d.messageId
       WHERE m.alertId = :alertId AND COALESCE(m.step, 0) = :step AND m.kind IN ('alert', 'escalation')
         AND d.createdAt >= :since
       GROUP BY d.personId HAVING MAX(d.receivedAt) IS NULL) AS people`,
    { alertId: alert.id, step: row.step, since: await announcedSince(parts.sequelize, alert.id, transaction) },
    transaction,
  )
  const { told, onTheWay } = waiting ?? { told: 0, onTheWay: 0 }
  if (isOver || (told === 0 && onTheWay === 0)) {
    await row.update({ nextReminderAt: null, endedAt: now }, { transaction })
    return null
  }
  await row.update({ nextReminderAt: reminderAfter(parts, await orderOf(alert, transaction)) }, { transaction })
  return told === 0 ? null : write(parts, 'reminder', row, alert, transaction)
}

/** What the first e-mail said, with why it comes again. */
async function write(
  parts: Parts,
  kind: 'alert' | 'escalation' | 'reminder',
  { step }: Escalation,
  alert: Alert,
  transaction: Transaction,
): Promise<number | null> {
  const first = await Message.findOne({
    where: { alertId: alert.id, kind: 'alert' },
    order: [['id', 'DESC']],
    transaction,
  })
  if (!first?.content) return null
  const content = messageContent.parse(first.content)
  const message = {
    ...{ kind, alertId: alert.id, step, content, isExercise: alert.isExercise },
    subject: subjectLineOf(kind, content),
    text: messageTextOf(kind, content),
  }
  return (await writeMessage(parts, message, transaction)).id
}

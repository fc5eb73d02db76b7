/** Everything that one e-mail to one person says: the frozen content, and what is of that person alone. */
import { z } from 'zod'
import type { Transaction } from 'sequelize'
import { bulletinContent } from '../../../shared/schemas/bulletin.ts'
import type { BulletinContent } from '../../../shared/schemas/bulletin.ts'
import { condition, recipients } from '../../../shared/schemas/limit.ts'
import type { SubjectKind } from '../../../shared/schemas/limit.ts'
import { messageContent, messageKind } from '../../../shared/schemas/message.ts'
import type { MessageContent, MessageKind } from '../../../shared/schemas/message.ts'
import type { Parts } from '../../config/parts.ts'
import type { Delivery } from '../../models/index.ts'
import { Alert, DistributionList, Escalation, Limit, LimitVersion, Message, Person } from '../../models/index.ts'
import { linkOfMessage } from '../people/sendLink.ts'
import { issueReceiptToken } from '../receipts.ts'

export interface Letter {
  deliveryId: number
  messageId: number
  kind: MessageKind
  address: string
  personName: string
  /** Names of those who are away and whose deputy this person is. */
  standsInFor: string | null
  messageIdHeader: string
  subject: string
  text: string
  content: MessageContent | null
  bulletin: BulletinContent | null
  isExercise: boolean
  alertId: number | null
  createdAt: Date
  /** From the second try on it may be a copy of one that arrived. */
  mayBeCopy: boolean
  isAcknowledged: boolean
  receipt: { token: string; expiresAt: Date } | null
  /** A page of the program that this e-mail opens, for its person alone. */
  link: { path: string; words: string } | null
  /** What follows without a receipt; in order of time. */
  next: { reminderAt: Date | null; step: { at: Date; lists: string[] } | null }
  /** Of which a drawing of the last hours can be made; null: of none. */
  drawing: { subjectKind: SubjectKind; subjectId: number; raise: number | null } | null
}

const askForReceipt: MessageKind[] = ['alert', 'reminder', 'escalation', 'flood']

export async function letterOf(
  parts: Pick<Parts, 'clock' | 'environment'>,
  delivery: Delivery,
  transaction: Transaction,
): Promise<Letter | null> {
  const [message, person] = await Promise.all([
    Message.findByPk(delivery.messageId, { transaction }),
    Person.findByPk(delivery.personId, { transaction }),
  ])
  if (!message || !person) return null
  const alert = message.alertId === null ? null : await Alert.findByPk(message.alertId, { transaction })
  const kind = messageKind.parse(message.kind)
  const isAsked = askForReceipt.includes(kind) && message.content !== null
  const forToken = { deliveryId: delivery.id, personId: person.id, createdAt: delivery.createdAt }
  return {
    deliveryId: delivery.id,
    messageId: message.id,
    kind,
    address: delivery.address,
    personName: person.name,
    standsInFor: delivery.standsInFor,
    messageIdHeader: delivery.messageIdHeader,
    subject: message.subject,
    text: message.text,
    content: z.nullable(messageContent).parse(message.content),
    bulletin: z.nullable(bulletinContent).parse(message.bulletin),
    isExercise: message.isExercise,
    alertId: message.alertId,
    createdAt: message.createdAt,
    mayBeCopy: delivery.unknownCount > 0,
    isAcknowledged: alert?.acknowledgedAt != null,
    receipt: isAsked ? await issueReceiptToken(parts, forToken, transaction) : null,
    link: await linkOfMessage(parts, message, transaction),
    next: alert && isAsked ? await nextOf(alert, message.step ?? 0, transaction) : { reminderAt: null, step: null },
    drawing: alert && !alert.isExercise ? await drawingOf(alert, transaction) : null,
  }
}

/** A drill's value is nothing that the sea did, and a rise is no value that could be drawn across. */
async function drawingOf(alert: Alert, transaction: Transaction): Promise<Letter['drawing']> {
  const [limit, version] = await Promise.all([
    Limit.findByPk(alert.limitId, { transaction }),
    LimitVersion.findByPk(alert.limitVersionId, { transaction }),
  ])
  if (limit?.limitClass !== 'wave' || limit.subjectId === null) return null
  const first = condition.parse(version?.condition).comparisons[0]
  const isValue = first.kind === 'below' || (first.kind === 'above' && first.riseOverSeconds === null)
  const { subjectKind, subjectId } = limit
  return { subjectKind, subjectId, raise: isValue ? first.raise : null }
}

/** From the stored times of the escalation itself. */
async function nextOf(alert: Alert, step: number, transaction: Transaction): Promise<Letter['next']> {
  const rows = await Escalation.findAll({
    where: { alertId: alert.id, endedAt: null },
    order: [['step', 'ASC']],
    transaction,
  })
  const reminderAt = rows.find((row) => row.step === step)?.nextReminderAt ?? null
  const following = rows.find((row) => row.sentAt === null && row.step > step)
  if (!following) return { reminderAt, step: null }
  const version = await LimitVersion.findByPk(alert.limitVersionId, { transaction })
  const listIds = recipients.parse(version?.steps).steps.at(following.step)?.listIds ?? []
  const lists = await DistributionList.findAll({ where: { id: listIds, retiredAt: null }, transaction })
  return { reminderAt, step: { at: following.dueAt, lists: lists.map(({ name }) => name) } }
}

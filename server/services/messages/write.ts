/** E-mails as they are written down: once for all who get them, in the transaction of what they tell. */
import { createHash, randomBytes } from 'node:crypto'
import type { Transaction } from 'sequelize'
import type { BulletinContent } from '../../../shared/schemas/bulletin.ts'
import type { MessageContent, MessageKind } from '../../../shared/schemas/message.ts'
import type { Parts } from '../../config/parts.ts'
import { Delivery, Message } from '../../models/index.ts'

export interface NewMessage {
  kind: MessageKind
  alertId?: number | null
  bulletinId?: number | null
  step?: number | null
  subject: string
  text: string
  content?: MessageContent | null
  /** Of a bulletin's e-mail: the bulletin as it is now. */
  bulletin?: BulletinContent | null
  isExercise?: boolean
}

const longestSubject = 200
const longestNames = 300

/** Without `recipients` they are worked out afterwards, from the lists of the alert's limit. */
export async function writeMessage(
  parts: Pick<Parts, 'clock' | 'environment'>,
  message: NewMessage,
  transaction: Transaction,
  recipients: Recipient[] | null = null,
): Promise<Message> {
  const now = parts.clock.now()
  const row = await Message.create(
    {
      kind: message.kind,
      alertId: message.alertId ?? null,
      bulletinId: message.bulletinId ?? null,
      step: message.step ?? null,
      subject: message.subject.slice(0, longestSubject),
      text: message.text,
      content: message.content ?? null,
      bulletin: message.bulletin ?? null,
      isExercise: message.isExercise ?? false,
      createdAt: now,
      queuedAt: recipients ? now : null,
    },
    { transaction },
  )
  if (recipients) await addDeliveries(parts, row.id, recipients, transaction)
  return row
}

export interface Recipient {
  personId: number
  address: string
  /** In a flood: its news waits until then for one e-mail that brings them all. */
  mergeAt?: Date
  /** Names of those who are away and whose deputy this is. */
  standsInFor?: string[]
}

/** One for each person, whatever is asked twice. */
export async function addDeliveries(
  { clock, environment }: Pick<Parts, 'clock' | 'environment'>,
  messageId: number,
  recipients: Recipient[],
  transaction: Transaction,
): Promise<void> {
  const now = clock.now()
  const rows = recipients.map(({ personId, address, mergeAt, standsInFor = [] }) => ({
    messageId,
    personId,
    address,
    messageIdHeader: messageIdHeader(environment.publicUrl, messageId, personId),
    state: mergeAt ? ('merged' as const) : ('queued' as const),
    nextAttemptAt: mergeAt ?? now,
    standsInFor: standsInFor.length > 0 ? standsInFor.join(', ').slice(0, longestNames) : null,
    createdAt: now,
  }))
  if (rows.length > 0) await Delivery.bulkCreate(rows, { ignoreDuplicates: true, transaction })
}

/** Stable for all tries of one e-mail, so that a second copy is known as such; it tells nothing about the person. */
function messageIdHeader(publicUrl: string, messageId: number, personId: number): string {
  const unique = createHash('sha256').update(`${messageId}/${personId}/`).update(randomBytes(16)).digest('hex')
  const host = new URL(publicUrl).hostname.replace(/[^\w.-]/g, '') || 'localhost'
  return `<${messageId}.${unique.slice(0, 20)}@${host}>`
}

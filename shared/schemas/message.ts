/** E-mails that leave the program: what they say is frozen when they are written. Times ISO 8601 UTC. */
import { z } from 'zod'
import { personName, priority, quantityKey } from './limit.ts'

const time = z.iso.datetime()

export const messageKind = z.enum([
  'alert',
  'reminder',
  'escalation',
  'allClear',
  'flood',
  'test',
  'heartbeat',
  /** A link to choose a passphrase: the first one, or another. */
  'invitation',
  'reset',
  /** To administrators: somebody put an urgent limit in force, or aside, without a second person. */
  'alone',
  /** A flag, closure or advisory: set, extended, withdrawn, about to expire, expired. */
  'notice',
  /** A bulletin issued or cancelled, or its proof to oneself. */
  'bulletin',
])
export type MessageKind = z.infer<typeof messageKind>

/**
 * The frozen content of an e-mail about an alert, made by pure functions in the transaction that made the alert. HTML
 * is drawn from it and from nothing else.
 */
export const messageContent = z.object({
  isExercise: z.boolean(),
  isDemonstration: z.boolean(),
  portName: z.string(),
  priority,
  /** `High, second most serious of four`. */
  priorityWords: z.string(),
  /** `Total height, Outer Ledge`. */
  title: z.string(),
  /** `Above 2.5 m for 10 min` or what became of it. */
  headline: z.string(),
  subjectName: z.string(),
  /** Written out with unit and ±; both senses where it is a bearing. */
  value: z.string(),
  limit: z.string(),
  quantity: quantityKey,
  /** `Swell from 247° T, toward 067° T, 1.9 m, 12 s`; null where no system is resolved. */
  waves: z.string().nullable(),
  /** For the glyph; degrees true and metres. */
  glyph: z.object({ toward: z.number(), height: z.number(), name: z.string() }).nullable(),
  /** `Thu 12 Nov 2026 14:20 UTC, 15:20 local`. */
  when: z.string(),
  windowEndsAt: time,
  /** Said where older windows had already exceeded it. */
  since: z.string().nullable(),
  quality: z.string(),
  toCheck: z.string(),
  /** Names of those who act on it. */
  handling: z.string(),
  caution: z.string(),
  /** Path of the alert's page, such as `/alerts/418`. */
  path: z.string(),
  /** In a flood: the other alerts that this e-mail brings the news of. */
  others: z.array(z.object({ line: z.string(), path: z.string() })).optional(),
})
export type MessageContent = z.infer<typeof messageContent>

export const deliveryState = z.enum(['queued', 'leased', 'accepted', 'refused', 'unknown', 'givenUp', 'merged'])
export type DeliveryState = z.infer<typeof deliveryState>

export const deliveryView = z.object({
  id: z.number().int(),
  person: personName,
  address: z.string(),
  /** Names of those who are away and whose deputy they are. */
  standsInFor: z.string().nullable(),
  state: deliveryState,
  attempts: z.number().int(),
  nextAttemptAt: time.nullable(),
  smtpReply: z.string().nullable(),
  /** The mail server's word. */
  acceptedAt: time.nullable(),
  /** The person's word. */
  receivedAt: time.nullable(),
})
export type DeliveryView = z.infer<typeof deliveryView>

export const messageView = z.object({
  id: z.number().int(),
  kind: messageKind,
  alertId: z.number().int().nullable(),
  rootMessageId: z.number().int().nullable(),
  step: z.number().int().nullable(),
  subject: z.string(),
  isExercise: z.boolean(),
  createdAt: time,
  deliveries: z.array(deliveryView),
})
export type MessageView = z.infer<typeof messageView>
export const messageDetail = messageView.extend({ text: z.string(), html: z.string().nullable() })
export const messageList = z.object({ messages: z.array(messageView), next: z.number().int().nullable() })

/** How an alert stands now. */
const receiptAlert = z.object({
  id: z.number().int(),
  state: z.string(),
  stateWords: z.string(),
  acknowledgedAt: time.nullable(),
  acknowledgedBy: z.string().nullable(),
  closedAt: time.nullable(),
})

/** What `/receipt/TOKEN` shows; asking changes nothing. */
export const receiptView = z.object({
  person: z.string(),
  portName: z.string(),
  isExercise: z.boolean(),
  isDemonstration: z.boolean(),
  expiresAt: time,
  isExpired: z.boolean(),
  /** Whom to call here in an emergency, as the office has set it; empty: nothing was set. */
  emergencyLine: z.string(),
  confirmedAt: time.nullable(),
  content: messageContent,
  alert: receiptAlert,
  /** In a flood: the other alerts whose receipt the same press confirms, most serious first. */
  others: z.array(receiptAlert.extend({ priority, title: z.string(), value: z.string(), when: z.string() })),
})
export type ReceiptView = z.infer<typeof receiptView>

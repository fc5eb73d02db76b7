/**
 * In a flood one e-mail brings the news of many. The first ones go out by themselves; what comes after them within ten
 * minutes waits for the next e-mail that lists it, at most one every five minutes to each person. Urgent ones are let
 * out by themselves for longer.
 */
import type { Transaction } from 'sequelize'
import { priority } from '../../../shared/schemas/limit.ts'
import type { Priority } from '../../../shared/schemas/limit.ts'
import type { MessageContent } from '../../../shared/schemas/message.ts'
import type { Parts } from '../../config/parts.ts'
import { Delivery, Message } from '../../models/index.ts'
import { execute, select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'
import { writeMessage } from './write.ts'
import type { Recipient } from './write.ts'

const floodMs = 10 * 60_000
const betweenRootsMs = 5 * 60_000
const mostByThemselves = 10
const mostUrgentByThemselves = 30
/** Lines in one e-mail; the rest is counted. */
const mostLines = 60

/** Says of each recipient whether the message goes to them by itself or waits. */
export async function holdInFlood(
  { clock, sequelize }: Pick<Parts, 'clock' | 'sequelize'>,
  recipients: Recipient[],
  ofPriority: Priority,
  transaction: Transaction,
): Promise<Recipient[]> {
  if (recipients.length === 0) return []
  const now = clock.now().getTime()
  const rows = await select<{ personId: number; ofItself: number; newestRoot: Date | null }>(
    sequelize,
    `SELECT d.personId, CAST(SUM(m.kind <> 'flood') AS DOUBLE) AS ofItself,
            MAX(IF(m.kind = 'flood', d.createdAt, NULL)) AS newestRoot
     FROM deliveries d JOIN messages m ON m.id = d.messageId
     WHERE d.personId IN (:people) AND d.createdAt > :since AND d.state <> 'merged' AND m.isExercise = 0
       AND m.kind IN ('alert', 'escalation', 'reminder', 'allClear', 'flood')
     GROUP BY d.personId`,
    { people: recipients.map(({ personId }) => personId), since: new Date(now - floodMs) },
    transaction,
  )
  const most = ofPriority === 'urgent' ? mostUrgentByThemselves : mostByThemselves
  return recipients.map((recipient) => {
    const row = rows.find(({ personId }) => personId === recipient.personId)
    if (!row || Number(row.ofItself) < most) return recipient
    const root = row.newestRoot ? new Date(row.newestRoot).getTime() : -Infinity
    return { ...recipient, mergeAt: new Date(Math.max(now, root + betweenRootsMs)) }
  })
}

interface Held {
  id: number
  messageId: number
  personId: number
  address: string
  standsInFor: string | null
}

/** Writes the e-mails that list what waits, one for all people of whom the same waits; answers their ids. */
export async function mergeFlood(parts: Parts): Promise<number[]> {
  const now = parts.clock.now()
  const roots = await inTransaction(parts.sequelize, async (transaction) => {
    // Who has confirmed meanwhile need not be told again.
    await execute(
      parts.sequelize,
      "UPDATE deliveries SET nextAttemptAt = NULL WHERE state = 'merged' AND nextAttemptAt IS NOT NULL AND receivedAt IS NOT NULL",
      {},
      transaction,
    )
    const held = await select<Held>(
      parts.sequelize,
      `SELECT id, messageId, personId, address, standsInFor FROM deliveries
       WHERE state = 'merged' AND (nextAttemptAt <= :now OR nextAttemptAt > :ahead) ORDER BY messageId, id LIMIT 5000 FOR UPDATE SKIP LOCKED`,
      { now, ahead: new Date(now.getTime() + floodMs) },
      transaction,
    )
    const made: number[] = []
    for (const group of byWhatWaits(held)) made.push(await writeRoot(parts, group, transaction))
    return made
  })
  for (const messageId of roots) parts.bus.publish('message.changed', { messageId, alertId: null })
  return roots
}

function byWhatWaits(held: Held[]): Held[][] {
  const ofPerson = new Map<number, Held[]>()
  for (const one of held) ofPerson.set(one.personId, [...(ofPerson.get(one.personId) ?? []), one])
  const groups = new Map<string, Held[]>()
  for (const waiting of ofPerson.values()) {
    const key = waiting.map(({ messageId }) => messageId).join()
    groups.set(key, [...(groups.get(key) ?? []), ...waiting])
  }
  return [...groups.values()]
}

async function writeRoot(parts: Parts, group: Held[], transaction: Transaction): Promise<number> {
  const messageIds = [...new Set(group.map(({ messageId }) => messageId))]
  const messages = await Message.findAll({ where: { id: messageIds }, transaction })
  const recipients = recipientsOf(group)
  const root = await writeMessage(parts, { kind: 'flood', ...tellAll(messages) }, transaction, recipients)
  await Delivery.update(
    { rootMessageId: root.id, nextAttemptAt: null },
    { where: { id: group.map(({ id }) => id) }, transaction },
  )
  await execute(
    parts.sequelize,
    'UPDATE messages SET rootMessageId = :root WHERE id IN (:ids) AND rootMessageId IS NULL',
    { root: root.id, ids: messageIds },
    transaction,
  )
  return root.id
}

/** Each person once, with the names of all whom they stand in for. */
function recipientsOf(group: Held[]): Recipient[] {
  const people = new Map<number, Recipient & { standsInFor: string[] }>()
  for (const { personId, address, standsInFor } of group) {
    const known = people.get(personId) ?? { personId, address, standsInFor: [] }
    people.set(personId, known)
    if (standsInFor !== null && !known.standsInFor.includes(standsInFor)) known.standsInFor.push(standsInFor)
  }
  return [...people.values()]
}

const isCleared = ({ kind }: Message): boolean => kind === 'allClear'
const isReminder = ({ kind }: Message): boolean => kind === 'reminder'
const mark = (message: Message): string => (isCleared(message) ? 'Cleared, ' : isReminder(message) ? 'Reminder, ' : '')

/** `30 more alerts in a short time`; of reminders alone, what they remind of. */
function countOf(messages: Message[]): string {
  const alerts = messages.length === 1 ? '1 more alert' : `${messages.length} more alerts`
  return messages.every(isReminder) ? `${alerts} without your receipt` : `${alerts} in a short time`
}

const rank = (message: Message): number =>
  (isCleared(message) ? -10 : 0) + priority.options.indexOf(message.content?.priority ?? 'low')

/** The most serious first, newest first among equals. */
function tellAll(messages: Message[]): { subject: string; text: string; content: MessageContent | null } {
  const sorted = [...messages].sort((a, b) => rank(b) - rank(a) || b.id - a.id)
  const contents = sorted.flatMap((message) => (message.content ? [{ message, content: message.content }] : []))
  const lines = contents.map(({ message, content }) => ({
    line: `${mark(message)}${content.priorityWords.split(',')[0]}: ${content.title} ${content.value}. ${content.when}`,
    path: content.path,
  }))
  const count = countOf(sorted)
  const first = contents.at(0)
  const unlisted = lines.length - mostLines
  const text = [
    `${count}. One e-mail lists them, so that no single one is lost among many. Most serious first.`,
    '',
    ...lines.slice(0, mostLines).map(({ line }) => `- ${line}`),
    ...(unlisted > 0 ? [`and ${unlisted} more on the page of alerts.`] : []),
    '',
    first?.content.caution ?? '',
  ].join('\n')
  const marked = first?.content.isDemonstration ? 'DEMONSTRATION ' : ''
  return {
    subject: `${marked}${count}${first ? `, first ${first.content.priority}: ${first.content.title}` : ''}`,
    text,
    content: first ? { ...first.content, others: lines.slice(1, mostLines) } : null,
  }
}

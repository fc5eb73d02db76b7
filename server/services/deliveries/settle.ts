/** What became of one try. */
import type { Transaction } from 'sequelize'
import type { DeliveryState } from '../../../shared/schemas/message.ts'
import type { Parts } from '../../config/parts.ts'
import { AlertEvent, Delivery, Message, Person } from '../../models/index.ts'
import { inTransaction } from '../transaction.ts'
import { writeSystemLine } from '../watchLog.ts'
import type { Leased } from './lease.ts'

export type Outcome =
  /** The mail server has taken it. */
  | { kind: 'accepted'; reply: string }
  /** It will never take it for this address. */
  | { kind: 'refused'; reply: string }
  /** Not now. */
  | { kind: 'later'; reply: string }
  /** It had the whole e-mail and gave no answer. */
  | { kind: 'unknown'; reply: string }
  /** Not tried at all, for the server did not answer others: does not count. */
  | { kind: 'untried' }

const firstWaitMs = 10_000
const longestWaitMs = 15 * 60_000
/** News of the sea is old after that. */
const longestMs = 12 * 3_600_000
const mostUnknown = 2
const longestReply = 500

/** Doubled at each try, a quarter more or less, so that many do not come back together. `chance`: 0 to 1. */
export function waitBefore(attempt: number, chance: number): number {
  const wait = Math.min(longestWaitMs, firstWaitMs * 2 ** Math.min(20, attempt - 1))
  return Math.round(wait * (0.75 + chance / 2))
}

interface Settled {
  state: DeliveryState
  nextAttemptAt: Date | null
  isFinal: boolean
}

function verdict(delivery: Delivery, message: Message, outcome: Outcome, now: number, chance: number): Settled {
  const again = new Date(now + waitBefore(Math.max(1, delivery.attempts), chance))
  switch (outcome.kind) {
    case 'accepted':
    case 'refused':
      return { state: outcome.kind, nextAttemptAt: null, isFinal: true }
    case 'untried':
      return { state: delivery.unknownCount > 0 ? 'unknown' : 'queued', nextAttemptAt: again, isFinal: false }
    case 'unknown':
      return delivery.unknownCount + 1 >= mostUnknown
        ? { state: 'unknown', nextAttemptAt: null, isFinal: true }
        : { state: 'unknown', nextAttemptAt: again, isFinal: false }
    case 'later': {
      const isTooOld = again.getTime() - message.createdAt.getTime() > longestMs
      if (isTooOld) return { state: 'givenUp', nextAttemptAt: null, isFinal: true }
      return { state: delivery.unknownCount > 0 ? 'unknown' : 'queued', nextAttemptAt: again, isFinal: false }
    }
  }
}

/** A settlement that comes after its lease was lost counts only where it brings the server's acceptance. */
export async function settleDelivery(
  parts: Parts,
  leased: Pick<Leased, 'deliveryId' | 'attempt'>,
  outcome: Outcome,
  chance: number = Math.random(),
): Promise<void> {
  const news = await inTransaction(parts.sequelize, async (transaction) => {
    const delivery = await Delivery.findByPk(leased.deliveryId, { lock: true, transaction })
    const message = delivery && (await Message.findByPk(delivery.messageId, { transaction }))
    if (!delivery || !message) return null
    const isMine = delivery.state === 'leased' && delivery.attempts === leased.attempt
    if (!isMine && (outcome.kind !== 'accepted' || delivery.acceptedAt)) return null
    const now = parts.clock.now()
    const { isFinal, ...settled } = verdict(delivery, message, outcome, now.getTime(), chance)
    await delivery.update(
      {
        ...settled,
        leaseUntil: null,
        handedOverAt: null,
        ...(outcome.kind !== 'untried' && { smtpReply: outcome.reply.slice(0, longestReply) }),
        ...(outcome.kind === 'untried' && { attempts: delivery.attempts - 1 }),
        ...(outcome.kind === 'unknown' && { unknownCount: delivery.unknownCount + 1 }),
        ...(outcome.kind === 'accepted' && { acceptedAt: now }),
      },
      { transaction },
    )
    if (outcome.kind === 'accepted' || outcome.kind === 'refused') {
      await Person.update({ mailHealth: outcome.kind }, { where: { id: delivery.personId }, transaction })
    }
    if (isFinal && settled.state !== 'accepted') await sayNotOut(parts, delivery, message, transaction)
    return { messageId: message.id, alertId: message.alertId }
  })
  if (news) parts.bus.publish('message.changed', news)
}

const words: Partial<Record<DeliveryState, string>> = {
  refused: 'the mail server refused it',
  givenUp: 'given up after many tries',
  unknown: 'sent twice without an answer, so nobody knows whether it arrived',
}

async function sayNotOut(parts: Parts, delivery: Delivery, message: Message, transaction: Transaction): Promise<void> {
  const person = await Person.findByPk(delivery.personId, { transaction })
  const mark = message.isExercise ? 'EXERCISE. ' : ''
  const state: DeliveryState = delivery.state
  const why = `${words[state] ?? 'not out'} (${delivery.smtpReply ?? 'no reply'})`
  const text = `${mark}E-mail ${message.id} to ${person?.name ?? 'somebody'}: ${why}.`
  const links = { messageId: message.id, ...(message.alertId !== null && { alertId: message.alertId }) }
  await writeSystemLine(parts, { kind: 'message', text, links }, transaction)
  if (message.alertId === null) return
  const event = { alertId: message.alertId, at: parts.clock.now(), kind: 'message' as const, text: text.slice(0, 400) }
  await AlertEvent.create(event, { transaction })
}

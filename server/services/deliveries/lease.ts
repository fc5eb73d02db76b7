/** Takes e-mails out of the queue for a while: whoever holds one longer than its lease has lost it. */
import type { Transaction } from 'sequelize'
import type { Parts } from '../../config/parts.ts'
import { Delivery } from '../../models/index.ts'
import { execute, select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'
import { letterOf } from './letter.ts'
import type { Letter } from './letter.ts'

const leaseMs = 60_000
/** Nothing is ever put off for longer: what lies further ahead was stored before the clock was set back. */
const furthestAheadMs = 20 * 60_000
const mostUnknown = 2

const due = (clock: Parts['clock']) => ({
  now: clock.now(),
  ahead: new Date(clock.now().getTime() + furthestAheadMs),
})

export interface Leased extends Letter {
  /** Number of this try; a settlement of an earlier one comes too late. */
  attempt: number
}

/**
 * What was leased and never settled: one that was not yet handed over is simply due again; of another nobody knows, and
 * it goes out once more with the same Message-ID. `all`: also those whose lease still runs, at the start of the only process.
 */
export async function recoverLeases(
  { sequelize, clock }: Pick<Parts, 'sequelize' | 'clock'>,
  all = false,
): Promise<number> {
  return execute(
    sequelize,
    `UPDATE deliveries
     SET nextAttemptAt = IF(handedOverAt IS NOT NULL AND unknownCount + 1 >= :most, NULL, :now),
         unknownCount = unknownCount + IF(handedOverAt IS NULL, 0, 1),
         state = IF(handedOverAt IS NULL, 'queued', 'unknown'),
         leaseUntil = NULL
     WHERE state = 'leased' ${all ? '' : 'AND (leaseUntil <= :now OR leaseUntil > :ahead)'}`,
    { ...due(clock), most: mostUnknown },
  )
}

/** The most serious first, then the one that waits longest. */
export async function leaseDeliveries(parts: Parts, most: number): Promise<Leased[]> {
  const { sequelize, clock } = parts
  const waiting = await select<{ id: number }>(
    sequelize,
    `SELECT d.id FROM deliveries d JOIN messages m ON m.id = d.messageId LEFT JOIN alerts a ON a.id = m.alertId
     WHERE d.state IN ('queued', 'unknown') AND (d.nextAttemptAt <= :now OR d.nextAttemptAt > :ahead)
     ORDER BY COALESCE(a.priority + 0, IF(m.kind = 'flood', 3, 1)) DESC, d.nextAttemptAt, d.id LIMIT :most`,
    { ...due(clock), most },
  )
  if (waiting.length === 0) return []
  const wanted = waiting.map(({ id }) => id)
  const { leased, messageIds } = await inTransaction(sequelize, async (transaction) => {
    const rows = await select<{ id: number }>(
      sequelize,
      `SELECT id FROM deliveries WHERE id IN (:wanted) AND state IN ('queued', 'unknown') AND (nextAttemptAt <= :now OR nextAttemptAt > :ahead) FOR UPDATE SKIP LOCKED`,
      { wanted, ...due(clock) },
      transaction,
    )
    const deliveries = await Delivery.findAll({ where: { id: rows.map(({ id }) => id) }, transaction })
    deliveries.sort((a, b) => wanted.indexOf(a.id) - wanted.indexOf(b.id))
    const taken: Leased[] = []
    for (const delivery of deliveries) {
      const one = await lease(parts, delivery, transaction)
      if (one) taken.push(one)
    }
    return { leased: taken, messageIds: new Set(deliveries.map(({ messageId }) => messageId)) }
  })
  for (const messageId of messageIds) parts.bus.publish('message.changed', { messageId, alertId: null })
  return leased
}

async function lease(parts: Parts, delivery: Delivery, transaction: Transaction): Promise<Leased | null> {
  const letter = await letterOf(parts, delivery, transaction)
  if (!letter) return null
  // A reminder that waited while its person confirmed has nothing left to say.
  if (letter.kind === 'reminder' && delivery.receivedAt) {
    const smtpReply = 'Not sent: the receipt was confirmed before'
    await delivery.update({ state: 'merged', nextAttemptAt: null, smtpReply }, { transaction })
    return null
  }
  const attempt = delivery.attempts + 1
  const leaseUntil = new Date(parts.clock.now().getTime() + leaseMs)
  await delivery.update({ state: 'leased', attempts: attempt, leaseUntil, handedOverAt: null }, { transaction })
  return { ...letter, attempt }
}

/** To be said before the mail server may have the whole e-mail; false: the lease is lost and nothing is to be sent. */
export async function handOver(
  { sequelize, clock }: Pick<Parts, 'sequelize' | 'clock'>,
  { deliveryId, attempt }: Pick<Leased, 'deliveryId' | 'attempt'>,
): Promise<boolean> {
  const changed = await execute(
    sequelize,
    `UPDATE deliveries SET handedOverAt = :now WHERE id = :deliveryId AND attempts = :attempt AND state = 'leased'`,
    { now: clock.now(), deliveryId, attempt },
  )
  return changed === 1
}

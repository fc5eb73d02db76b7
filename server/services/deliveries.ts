/** One e-mail to one person on its way to the mail server. */
import type { Parts } from '../config/parts.ts'
import { Delivery } from '../models/index.ts'
import { recordAudit } from './audit.ts'
import { notFound, Refused } from './problems.ts'
import { inTransaction } from './transaction.ts'

export { handOver, leaseDeliveries, recoverLeases } from './deliveries/lease.ts'
export type { Leased } from './deliveries/lease.ts'
export { settleDelivery } from './deliveries/settle.ts'
export type { Outcome } from './deliveries/settle.ts'

/** An operator has it tried again, at once. */
export async function retryDelivery(parts: Parts, deliveryId: number, byPersonId: number): Promise<number> {
  const { messageId } = await inTransaction(parts.sequelize, async (transaction) => {
    const delivery = await Delivery.findByPk(deliveryId, { lock: true, transaction })
    if (!delivery) throw notFound('delivery', deliveryId)
    const { state } = delivery
    if (state !== 'refused' && state !== 'givenUp' && state !== 'unknown') throw notStuck()
    await delivery.update({ state: 'queued', nextAttemptAt: parts.clock.now() }, { transaction })
    const change = { action: 'delivery.retry', entity: 'delivery', entityId: deliveryId, before: { state } }
    await recordAudit(parts, { ...change, personId: byPersonId, after: { state: 'queued' } }, transaction)
    return delivery
  })
  parts.bus.publish('message.changed', { messageId, alertId: null })
  return messageId
}

const notStuck = (): Refused =>
  new Refused({
    status: 409,
    code: 'delivery.notStuck',
    title: 'Nothing to try again',
    detail: 'Only an e-mail that is refused, given up or unknown can be tried again.',
  })

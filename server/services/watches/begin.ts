/** A watch begins where nobody is on watch, or ends without a relief: both are lines of the log. */
import type { Transaction } from 'sequelize'
import type { Parts } from '../../config/parts.ts'
import { Person, Watch } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { Refused } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import { writeSystemLine } from '../watchLog.ts'

export type WatchParts = Pick<Parts, 'bus' | 'clock' | 'sequelize'>

/** The open one, locked; null: nobody is on watch. */
export const openWatch = (transaction: Transaction): Promise<Watch | null> =>
  Watch.findOne({ where: { endedAt: null }, lock: true, transaction })

export async function nameOf(personId: number, transaction: Transaction): Promise<string> {
  const person = await Person.findByPk(personId, { attributes: ['name'], transaction })
  return person?.name ?? `Person ${personId}`
}

/** `Watch B, officer B-2`; the officer alone where watches have no names. */
export const titleOf = (watchName: string, officer: string): string =>
  watchName === '' ? officer : `Watch ${watchName}, ${officer}`

export async function beginWatch(
  { clock }: Pick<Parts, 'clock'>,
  { personId, name }: { personId: number; name: string },
  transaction: Transaction,
): Promise<Watch> {
  const row = { personId, name, startedAt: clock.now(), notes: {}, expected: '' }
  return Watch.create(row, { transaction })
}

/** Throws the 409 where somebody is on watch. */
export async function startWatch(parts: WatchParts, order: { personId: number; name: string }): Promise<void> {
  await inTransaction(parts.sequelize, async (transaction) => {
    const open = await openWatch(transaction)
    if (open) {
      const detail = `${await nameOf(open.personId, transaction)} is on watch: take over by a hand-over, or at once with a reason.`
      throw new Refused({ status: 409, code: 'watch.taken', title: 'Somebody is on watch', detail })
    }
    const watch = await beginWatch(parts, order, transaction)
    const officer = await nameOf(order.personId, transaction)
    const line = `${titleOf(order.name, officer)}: watch begun. Nobody was on watch before.`
    await writeSystemLine(parts, { kind: 'watch', text: line, personId: order.personId, links: { watchId: watch.id } }, transaction) // prettier-ignore
    const audit = { action: 'watch.begin', entity: 'watch', entityId: watch.id, personId: order.personId, after: order }
    await recordAudit(parts, audit, transaction)
  })
  parts.bus.publish('watch.changed', {})
}

export const notOnWatch = (): Refused => {
  const detail = 'Only who is on watch may do this. The page shows who that is.'
  return new Refused({ status: 409, code: 'watch.notYours', title: 'Not your watch', detail })
}

/** Nobody follows: allowed, for it happens, and said in the log for everybody. */
export async function endWatch(
  parts: WatchParts,
  { personId, reason }: { personId: number; reason: string },
): Promise<void> {
  await inTransaction(parts.sequelize, async (transaction) => {
    const watch = await openWatch(transaction)
    if (watch?.personId !== personId) throw notOnWatch()
    await watch.update({ endedAt: parts.clock.now() }, { transaction })
    const line = `${titleOf(watch.name, await nameOf(personId, transaction))}: watch ended, nobody takes over. ${reason}`
    await writeSystemLine(parts, { kind: 'watch', text: line, personId, links: { watchId: watch.id } }, transaction)
    const audit = { action: 'watch.end', entity: 'watch', entityId: watch.id, personId, after: { reason } }
    await recordAudit(parts, audit, transaction)
  })
  parts.bus.publish('watch.changed', {})
}

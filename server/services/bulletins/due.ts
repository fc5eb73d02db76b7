/** A next issue that was promised and did not come is news for the watch, once. */
import { Op } from 'sequelize'
import { clockUtc } from '../../../shared/times.ts'
import type { Parts } from '../../config/parts.ts'
import { Bulletin } from '../../models/index.ts'
import { inTransaction } from '../transaction.ts'
import { writeSystemLine } from '../watchLog.ts'

/** Answers how many were told of. */
export async function noteOverdueBulletins(parts: Pick<Parts, 'bus' | 'clock' | 'sequelize'>): Promise<number> {
  const ids = await inTransaction(parts.sequelize, async (transaction) => {
    const where = { status: 'issued', nextIssueAt: { [Op.lte]: parts.clock.now() }, remindedAt: null } as const
    const due = await Bulletin.findAll({ where, lock: true, transaction })
    for (const bulletin of due) {
      const promised = bulletin.nextIssueAt === null ? '' : ` by ${clockUtc(bulletin.nextIssueAt.getTime())} UTC`
      const text = `After bulletin ${bulletin.number} the next one was promised${promised}. None was issued.`
      await writeSystemLine(parts, { kind: 'bulletin', text, links: { bulletinId: bulletin.id } }, transaction)
      await bulletin.update({ remindedAt: parts.clock.now() }, { transaction })
    }
    return due.map(({ id }) => id)
  })
  for (const bulletinId of ids) parts.bus.publish('bulletin.changed', { bulletinId })
  return ids.length
}

import type { Sequelize, Transaction } from 'sequelize'
import { select } from '../../models/sql.ts'

/**
 * Since when people are told of an alert as it stands: the writing of its newest first e-mail. One that comes again is
 * told again to everybody, so receipts and e-mails of an earlier time do not count.
 */
export async function announcedSince(sequelize: Sequelize, alertId: number, transaction: Transaction): Promise<Date> {
  const [newest] = await select<{ since: Date | null }>(
    sequelize,
    `SELECT MAX(createdAt) AS since FROM messages
     WHERE alertId = :alertId AND kind = 'alert' AND COALESCE(step, 0) = 0`,
    { alertId },
    transaction,
  )
  return newest?.since ?? new Date(0)
}

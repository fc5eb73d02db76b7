import type { Transaction } from 'sequelize'
import type { Parts } from '../../config/parts.ts'
import { LinkToken } from '../../models/index.ts'
import { hashOfToken, signReceipt } from './token.ts'

/** A link lives a day from the e-mail's writing, whenever it goes out. */
export const linkLivesMs = 24 * 3_600_000

/** The same token for every try of one e-mail. */
export async function issueReceiptToken(
  { clock, environment }: Pick<Parts, 'clock' | 'environment'>,
  { deliveryId, personId, createdAt }: { deliveryId: number; personId: number; createdAt: Date },
  transaction: Transaction,
): Promise<{ token: string; expiresAt: Date }> {
  const expiresAt = new Date(Math.floor((createdAt.getTime() + linkLivesMs) / 1000) * 1000)
  const token = signReceipt(environment.jwtSecret, { deliveryId, expiresAt })
  const tokenHash = hashOfToken(token)
  const known = await LinkToken.findOne({ where: { tokenHash }, transaction })
  if (!known) {
    const row = { tokenHash, kind: 'receipt' as const, personId, subjectId: deliveryId, expiresAt }
    await LinkToken.create({ ...row, createdAt: clock.now() }, { transaction })
  }
  return { token, expiresAt }
}

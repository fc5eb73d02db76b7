/** Ten codes on paper, each good once in place of the telephone: 80 bits of chance each, so a plain hash is enough. */
import { createHash, randomBytes } from 'node:crypto'
import type { Transaction } from 'sequelize'
import type { Parts } from '../../config/parts.ts'
import { RecoveryCode } from '../../models/index.ts'

const howMany = 10
const letters = 'abcdefghijklmnopqrstuvwxyz234567'
const length = 16

/** Without hyphens; 32 letters divide 256 evenly, so none is likelier than another. */
const makeCode = (): string => [...randomBytes(length)].map((byte) => letters[byte % letters.length]).join('')

const hashOf = (personId: number, code: string): Buffer =>
  createHash('sha256').update(`offing.recovery.1\n${personId}\n${code}`).digest()

/** In fours, as people read them. */
const inFours = (code: string): string => (code.match(/.{4}/g) ?? []).join('-')

/** Older ones are worth nothing from now on. */
export async function issueRecoveryCodes(
  { clock }: Pick<Parts, 'clock'>,
  personId: number,
  transaction: Transaction,
): Promise<string[]> {
  const codes = Array.from({ length: howMany }, makeCode)
  await RecoveryCode.destroy({ where: { personId }, transaction })
  const rows = codes.map((code) => ({ personId, codeHash: hashOf(personId, code), createdAt: clock.now() }))
  await RecoveryCode.bulkCreate(rows, { transaction })
  return codes.map(inFours)
}

/** True once for each code. */
export async function useRecoveryCode(
  { clock }: Pick<Parts, 'clock'>,
  personId: number,
  code: string,
  transaction: Transaction,
): Promise<boolean> {
  const where = { personId, codeHash: hashOf(personId, code), usedAt: null }
  const [changed] = await RecoveryCode.update({ usedAt: clock.now() }, { where, transaction })
  return changed === 1
}

export const countRecoveryCodes = (personId: number): Promise<number> =>
  RecoveryCode.count({ where: { personId, usedAt: null } })

export async function forgetRecoveryCodes(personId: number, transaction: Transaction): Promise<void> {
  await RecoveryCode.destroy({ where: { personId }, transaction })
}

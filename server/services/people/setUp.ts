/** The first administrator of an installation in real use, by a token that works once and lies in a file of the server. */
import { createHash, randomBytes } from 'node:crypto'
import { rm, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { Op } from 'sequelize'
import type { SetUpRequest } from '../../../shared/schemas/session.ts'
import type { Parts } from '../../config/parts.ts'
import { LinkToken, Person } from '../../models/index.ts'
import { addPerson, preparePerson } from '../people.ts'
import { Refused } from '../problems.ts'
import { inTransaction } from '../transaction.ts'

const validMilliseconds = 24 * 3600_000
const hashOf = (token: string): Buffer => createHash('sha256').update(token).digest()

export const setUpTokenFile = ({ environment }: Pick<Parts, 'environment'>): string =>
  join(environment.dataFolder, 'set-up-token')

/** Where there is no administrator: a fresh token in a file that only the server's user reads. Answers the file's path, or null. */
export async function offerSetUp(parts: Parts): Promise<string | null> {
  if (await administratorExists()) return null
  const token = randomBytes(32).toString('base64url')
  const now = parts.clock.now()
  await inTransaction(parts.sequelize, async (transaction) => {
    await LinkToken.destroy({ where: { kind: 'setUp', usedAt: null }, transaction })
    await LinkToken.create(
      {
        tokenHash: hashOf(token),
        kind: 'setUp',
        createdAt: now,
        expiresAt: new Date(now.getTime() + validMilliseconds),
      },
      { transaction },
    )
  })
  const file = setUpTokenFile(parts)
  await rm(file, { force: true })
  await writeFile(file, `${token}\n`, { mode: 0o600, flag: 'wx' })
  return file
}

/** Makes the first administrator; afterwards the token is worthless. */
export async function completeSetUp(parts: Parts, request: SetUpRequest): Promise<void> {
  const { token, ...person } = request
  if (!(await LinkToken.findOne({ where: openToken(parts, token) }))) throw wrongToken()
  const prepared = await preparePerson(parts, { ...person, role: 'admin', team: null, timeZone: 'Etc/UTC' })
  await inTransaction(parts.sequelize, async (transaction) => {
    const row = await LinkToken.findOne({ where: openToken(parts, token), lock: true, transaction })
    if (!row || (await administratorExists())) throw wrongToken()
    const administrator = await addPerson(parts, prepared, null, transaction)
    await row.update({ usedAt: parts.clock.now(), personId: administrator.id }, { transaction })
  })
  await rm(setUpTokenFile(parts), { force: true })
}

const openToken = ({ clock }: Parts, token: string) => ({
  tokenHash: hashOf(token),
  kind: 'setUp' as const,
  usedAt: null,
  expiresAt: { [Op.gt]: clock.now() },
})

const administratorExists = async (): Promise<boolean> =>
  (await Person.count({ where: { role: 'admin', disabledAt: null } })) > 0

const wrongToken = (): Refused =>
  new Refused({
    status: 403,
    code: 'setUp.wrongToken',
    title: 'The set-up token does not fit',
    detail:
      'It is unknown, used or older than a day. The server writes a new one when it starts without an administrator.',
  })

/** The demonstration's accounts. Their passwords are made at the first start and kept in a file beside the database. */
import { join } from 'node:path'
import type { Transaction } from 'sequelize'
import { z } from 'zod'
import { demonstrationPort } from '../../shared/demonstration/stations.ts'
import type { Role, Team } from '../../shared/schemas/session.ts'
import type { Parts } from '../config/parts.ts'
import { Person } from '../models/index.ts'
import { hashPassword } from '../services/passwords.ts'
import { addPerson, preparePerson } from '../services/people.ts'
import { peopleFile } from '../setup/demonstrationPeople.ts'
import { makePassphrase } from './passphrase.ts'
import { readSecrets, writeSecrets } from './secretsFile.ts'

interface Account {
  name: string
  email: string
  role: Role
  team: Team | null
}

const accounts: Account[] = [
  { name: 'Duty officer A-1', email: 'duty.a1@marrowick.example', role: 'operator', team: null },
  { name: 'Duty officer B-2', email: 'duty.b2@marrowick.example', role: 'operator', team: null },
  { name: 'Instrument technician', email: 'technician@marrowick.example', role: 'admin', team: null },
  { name: 'Breakwater warden', email: 'warden@marrowick.example', role: 'partner', team: 'harbour' },
  { name: 'Head of patrol', email: 'patrol@marrowick.example', role: 'partner', team: 'beach safety' },
]

const shape = z.array(z.object({ email: z.string(), name: z.string(), role: z.string(), password: z.string() }))
type Credentials = z.infer<typeof shape>

/** What the file holds, or new ones where it is missing or does not name every account. `isNew`: the file was written now. */
async function credentialsOf({ environment }: Parts): Promise<{ credentials: Credentials; isNew: boolean }> {
  const file = join(environment.dataFolder, peopleFile)
  const kept = await readSecrets(file, shape)
  if (kept && accounts.every(({ email }) => kept.some((person) => person.email === email))) {
    return { credentials: kept, isNew: false }
  }
  const credentials = accounts.map(({ email, name, role }) => ({ email, name, role, password: makePassphrase() }))
  await writeSecrets(file, credentials)
  return { credentials, isNew: true }
}

/** Answers what is still to be written, with the slow part (hashing) done. The file comes first: after a stop it is used again. */
export async function prepareDemonstrationPeople(parts: Parts): Promise<(transaction: Transaction) => Promise<void>> {
  const { credentials, isNew } = await credentialsOf(parts)
  const passwordOf = (email: string): string => credentials.find((person) => person.email === email)?.password ?? ''
  const known = await Person.findAll({ where: { email: accounts.map(({ email }) => email) } })
  const missing = accounts.filter(({ email }) => !known.some((person) => person.email === email))
  const { timeZone } = demonstrationPort
  const prepared = await Promise.all(
    missing.map((account) => preparePerson(parts, { ...account, timeZone, password: passwordOf(account.email) })),
  )
  const renewed = isNew
    ? await Promise.all(
        known.map(async (person) => ({
          person,
          passwordHash: await hashPassword(passwordOf(person.email ?? ''), parts.environment.bcryptCost),
        })),
      )
    : []
  return async (transaction) => {
    for (const person of prepared) await addPerson(parts, person, null, transaction)
    for (const { person, passwordHash } of renewed) {
      await person.update({ passwordHash, updatedAt: parts.clock.now() }, { transaction })
    }
  }
}

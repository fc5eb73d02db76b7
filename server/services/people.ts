/** People who may sign in, made with their first passphrase. */
import type { Transaction } from 'sequelize'
import type { Role, Team } from '../../shared/schemas/session.ts'
import type { Parts } from '../config/parts.ts'
import { Person } from '../models/index.ts'
import { recordAudit } from './audit.ts'
import { faultOfPassword, hashPassword } from './passwords.ts'
import { invalidInput } from './problems.ts'

export interface NewPerson {
  name: string
  email: string
  role: Role
  team: Team | null
  timeZone: string
  password: string
}

/** Checks and hashes the password: slow, so before the transaction that adds the person. */
export async function preparePerson({ environment }: Pick<Parts, 'environment'>, person: NewPerson) {
  const fault = faultOfPassword(person.password, [person.name, person.email.split('@').at(0) ?? ''])
  if (fault) throw invalidInput([{ path: 'password', message: fault }])
  const { password, ...rest } = person
  return {
    ...rest,
    email: person.email.toLowerCase(),
    passwordHash: await hashPassword(password, environment.bcryptCost),
  }
}

export async function addPerson(
  parts: Pick<Parts, 'clock'>,
  prepared: Awaited<ReturnType<typeof preparePerson>>,
  byPersonId: number | null,
  transaction: Transaction,
): Promise<Person> {
  const now = parts.clock.now()
  const person = await Person.create({ ...prepared, createdAt: now, updatedAt: now }, { transaction })
  const { name, email, role, team } = prepared
  const after = { name, email, role, team }
  await recordAudit(
    parts,
    { personId: byPersonId, action: 'person.add', entity: 'person', entityId: person.id, after },
    transaction,
  )
  return person
}

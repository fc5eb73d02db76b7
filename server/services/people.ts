/** People: made, disabled, given another role. Each change is audited and heard at once by open sockets. */
import type { Transaction } from 'sequelize'
import type { Role, Team } from '../../shared/schemas/session.ts'
import type { Parts } from '../config/parts.ts'
import { Person, Session } from '../models/index.ts'
import { recordAudit } from './audit.ts'
import { faultOfPassword, hashPassword } from './passwords.ts'
import { invalidInput, notFound } from './problems.ts'
import { inTransaction } from './transaction.ts'

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

/** A disabled person is out at once, everywhere. */
export async function disablePerson(parts: Parts, personId: number, byPersonId: number | null): Promise<void> {
  await changePerson(parts, personId, byPersonId, 'person.disable', { disabledAt: parts.clock.now() })
}

export async function changeRole(parts: Parts, personId: number, role: Role, byPersonId: number | null): Promise<void> {
  await changePerson(parts, personId, byPersonId, 'person.changeRole', { role })
}

async function changePerson(
  parts: Parts,
  personId: number,
  byPersonId: number | null,
  action: string,
  change: { disabledAt: Date } | { role: Role },
): Promise<void> {
  const endedSessions = await inTransaction(parts.sequelize, async (transaction) => {
    const person = await Person.findByPk(personId, { lock: true, transaction })
    if (!person) throw notFound('person', personId)
    const before = { role: person.role, disabledAt: person.disabledAt }
    const now = parts.clock.now()
    await person.update({ ...change, version: person.version + 1, updatedAt: now }, { transaction })
    const after = { role: person.role, disabledAt: person.disabledAt }
    await recordAudit(
      parts,
      { personId: byPersonId, action, entity: 'person', entityId: personId, before, after },
      transaction,
    )
    if (!person.disabledAt) return []
    const where = { personId, endedAt: null }
    const sessions = await Session.findAll({ where, transaction })
    await Session.update({ endedAt: now, endReason: 'disabled' }, { where, transaction })
    return sessions.map((session) => session.id)
  })
  for (const sessionId of endedSessions) parts.bus.publish('session.ended', { sessionId })
  parts.bus.publish('person.changed', { personId })
}

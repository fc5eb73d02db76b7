/** People as accounts: list, invitation, change of role, disabling. Each change is one transaction with its audit. */
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import type { AccountChange, AccountView, Invitation } from '../../../shared/schemas/account.ts'
import type { Parts } from '../../config/parts.ts'
import { Person, Session } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { changedMeanwhile, invalidInput, notFound, Refused } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import { presentAccounts } from './presentAccounts.ts'
import { writeLinkMail } from './sendLink.ts'
import type { PortWords } from './sendLink.ts'

export async function listAccounts(parts: Parts): Promise<AccountView[]> {
  const people = await Person.findAll({
    order: [
      ['name', 'ASC'],
      ['id', 'ASC'],
    ],
  })
  return presentAccounts(parts, people)
}

export async function readAccount(parts: Parts, personId: number): Promise<AccountView> {
  const person = await Person.findByPk(personId)
  const [view] = person ? await presentAccounts(parts, [person]) : []
  if (!view) throw notFound('person', personId)
  return view
}

interface By {
  id: number
  name: string
}

export async function invite(parts: Parts, invitation: Invitation, by: By, port: PortWords): Promise<AccountView> {
  checkZone(invitation.timeZone)
  const now = parts.clock.now()
  const email = invitation.email.toLowerCase()
  const { personId, messageId } = await inTransaction(parts.sequelize, async (transaction) => {
    await refuseKnownAddress(email, null, transaction)
    const person = await Person.create({ ...invitation, email, createdAt: now, updatedAt: now }, { transaction })
    const change = { action: 'person.add', entity: 'person', entityId: person.id, after: { ...invitation, email } }
    await recordAudit(parts, { ...change, personId: by.id }, transaction)
    return { personId: person.id, messageId: await writeLinkMail(parts, person, by, port, transaction) }
  })
  parts.bus.publish('message.changed', { messageId, alertId: null })
  return readAccount(parts, personId)
}

/** An invitation to who has no passphrase yet, a reset to who has one. */
export async function sendLink(parts: Parts, personId: number, by: By, port: PortWords): Promise<AccountView> {
  const messageId = await inTransaction(parts.sequelize, async (transaction) => {
    const person = await Person.findByPk(personId, { lock: true, transaction })
    if (!person) throw notFound('person', personId)
    if (!person.role || person.email === null || person.disabledAt) throw cannotSignIn()
    return writeLinkMail(parts, person, by, port, transaction)
  })
  parts.bus.publish('message.changed', { messageId, alertId: null })
  return readAccount(parts, personId)
}

export async function changeAccount(
  parts: Parts,
  personId: number,
  version: number,
  change: AccountChange,
  byPersonId: number | null,
): Promise<AccountView> {
  checkZone(change.timeZone)
  const email = change.email?.toLowerCase() ?? null
  if (email === null && change.role !== null) throw invalidInput([{ path: 'email', message: 'is needed to sign in' }])
  return alter(parts, personId, version, byPersonId, 'person.change', async (person, transaction) => {
    if (email !== null) await refuseKnownAddress(email, personId, transaction)
    if (person.role === 'admin' && change.role !== 'admin') await keepAnAdministrator(personId, transaction)
    const health = email === person.email ? {} : { mailHealth: 'unknown' }
    return { ...change, email, ...health }
  })
}

/** A disabled person is out at once, everywhere, and gets no e-mails. */
export async function setDisabled(
  parts: Parts,
  personId: number,
  version: number,
  isDisabled: boolean,
  byPersonId: number | null,
): Promise<AccountView> {
  if (personId === byPersonId) throw notOneself()
  const action = isDisabled ? 'person.disable' : 'person.enable'
  return alter(parts, personId, version, byPersonId, action, async (person, transaction) => {
    if (isDisabled && person.role === 'admin') await keepAnAdministrator(personId, transaction)
    return { disabledAt: isDisabled ? (person.disabledAt ?? parts.clock.now()) : null }
  })
}

type Fields = Partial<Pick<Person, 'name' | 'email' | 'role' | 'team' | 'timeZone' | 'mailHealth' | 'disabledAt'>>

async function alter(
  parts: Parts,
  personId: number,
  version: number,
  byPersonId: number | null,
  action: string,
  fieldsOf: (person: Person, transaction: Transaction) => Promise<Fields>,
): Promise<AccountView> {
  const ended = await inTransaction(parts.sequelize, async (transaction) => {
    const person = await Person.findByPk(personId, { lock: true, transaction })
    if (!person) throw notFound('person', personId)
    if (person.version !== version) {
      throw changedMeanwhile('person', person.version, (await presentAccounts(parts, [person])).at(0))
    }
    const before = audited(person)
    const fields = await fieldsOf(person, transaction)
    const now = parts.clock.now()
    await person.update({ ...fields, version: version + 1, updatedAt: now }, { transaction })
    const change = { action, entity: 'person', entityId: personId, before, after: audited(person) }
    await recordAudit(parts, { ...change, personId: byPersonId }, transaction)
    return person.disabledAt || !person.role ? endSessions(personId, now, transaction) : []
  })
  for (const sessionId of ended) parts.bus.publish('session.ended', { sessionId })
  parts.bus.publish('person.changed', { personId })
  return readAccount(parts, personId)
}

async function endSessions(personId: number, now: Date, transaction: Transaction): Promise<string[]> {
  const where = { personId, endedAt: null }
  const sessions = await Session.findAll({ where, transaction })
  await Session.update({ endedAt: now, endReason: 'disabled' }, { where, transaction })
  return sessions.map(({ id }) => id)
}

const audited = ({ name, email, role, team, timeZone, disabledAt }: Person) => ({
  ...{ name, email, role, team, timeZone },
  disabledAt: disabledAt?.toISOString() ?? null,
})

/** All administrators are locked, so that two who disable each other do not both succeed. */
async function keepAnAdministrator(personId: number, transaction: Transaction): Promise<void> {
  const others = await Person.findAll({
    where: { role: 'admin', disabledAt: null, passwordHash: { [Op.not]: null } },
    lock: true,
    transaction,
  })
  if (others.every(({ id }) => id === personId)) throw lastAdministrator()
}

async function refuseKnownAddress(email: string, except: number | null, transaction: Transaction): Promise<void> {
  const known = await Person.findOne({ where: { email }, transaction })
  if (known && known.id !== except) throw invalidInput([{ path: 'email', message: `belongs to ${known.name}` }])
}

function checkZone(timeZone: string): void {
  try {
    new Intl.DateTimeFormat('en-GB', { timeZone })
  } catch {
    throw invalidInput([{ path: 'timeZone', message: 'is not a zone of the IANA list, such as Atlantic/Azores' }])
  }
}

const lastAdministrator = (): Refused =>
  new Refused({
    status: 409,
    code: 'person.lastAdministrator',
    title: 'The last administrator stays',
    detail: 'Nobody else could set anything up any more. Make somebody else an administrator first.',
  })

const notOneself = (): Refused =>
  new Refused({
    status: 409,
    code: 'person.oneself',
    title: 'Not yourself',
    detail: 'Another administrator can disable your account.',
  })

const cannotSignIn = (): Refused =>
  new Refused({
    status: 409,
    code: 'person.cannotSignIn',
    title: 'No link was sent',
    detail: 'A link needs an address, a role and an account that is not disabled.',
  })

/** People as recipients: address, hours, deputy, absences. Each change is audited. */
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { timeSpan } from '../../../shared/schemas/limit.ts'
import type { PersonName } from '../../../shared/schemas/limit.ts'
import { mailHealth } from '../../../shared/schemas/person.ts'
import type { PersonChange, PersonView, ProfileChange, RecipientDraft } from '../../../shared/schemas/person.ts'
import type { Parts } from '../../config/parts.ts'
import { Absence, DistributionList, ListMember, Person } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { changedMeanwhile, invalidInput, notFound } from '../problems.ts'
import { inTransaction } from '../transaction.ts'

export async function listPeople(parts: Pick<Parts, 'clock'>): Promise<PersonView[]> {
  const people = await Person.findAll({
    order: [
      ['name', 'ASC'],
      ['id', 'ASC'],
    ],
  })
  return present(parts, people)
}

export async function readPerson(parts: Pick<Parts, 'clock'>, personId: number): Promise<PersonView> {
  const person = await Person.findByPk(personId)
  const [view] = person ? await present(parts, [person]) : []
  if (!view) throw notFound('person', personId)
  return view
}

/** Names alone, of everybody else to whom e-mails go. */
export async function listDeputies(exceptId: number): Promise<PersonName[]> {
  const where = { id: { [Op.ne]: exceptId }, email: { [Op.ne]: null }, disabledAt: null }
  const people = await Person.findAll({ where, attributes: ['id', 'name'], order: [['name', 'ASC']] })
  return people.map(({ id, name }) => ({ id, name }))
}

/** Without a role: gets e-mails and cannot sign in. */
export async function addRecipient(parts: Parts, draft: RecipientDraft, byPersonId: number): Promise<PersonView> {
  const now = parts.clock.now()
  const email = draft.email.toLowerCase()
  const personId = await inTransaction(parts.sequelize, async (transaction) => {
    await refuseKnownAddress(email, null, transaction)
    const fields = { ...draft, email, role: null, createdAt: now, updatedAt: now }
    const { id } = await Person.create(fields, { transaction })
    const change = { action: 'person.add', entity: 'person', entityId: id, after: { ...draft, email, role: null } }
    await recordAudit(parts, { ...change, personId: byPersonId }, transaction)
    return id
  })
  return readPerson(parts, personId)
}

/** By an administrator, or by the watch and the persons themselves, who change no name and no address. */
export async function changeMailSide(
  parts: Parts,
  personId: number,
  version: number,
  { absences, ...change }: PersonChange | ProfileChange,
  byPersonId: number,
): Promise<PersonView> {
  const named = 'name' in change ? { ...change, email: change.email?.toLowerCase() ?? null } : null
  const fields = named ?? change
  await inTransaction(parts.sequelize, async (transaction) => {
    const person = await Person.findByPk(personId, { lock: true, transaction })
    if (!person) throw notFound('person', personId)
    if (person.version !== version) {
      throw changedMeanwhile('person', person.version, (await present(parts, [person])).at(0))
    }
    if (named?.email) await refuseKnownAddress(named.email, personId, transaction)
    if (named?.email === null && person.role !== null) throw needsAddress()
    await checkDeputy(personId, fields.deputyId, transaction)
    const before = await mailSideOf(parts, person, transaction)
    const isNewAddress = named !== null && named.email !== person.email
    const now = parts.clock.now()
    const health = isNewAddress ? { mailHealth: 'unknown' } : {}
    await person.update({ ...fields, ...health, version: version + 1, updatedAt: now }, { transaction })
    await Absence.destroy({ where: { personId, endsAt: { [Op.gt]: now } }, transaction })
    const rows = absences.map(({ startsAt, endsAt }) => ({
      personId,
      startsAt: new Date(startsAt),
      endsAt: new Date(endsAt),
    }))
    if (rows.length > 0) await Absence.bulkCreate(rows, { transaction })
    const after = await mailSideOf(parts, person, transaction)
    const audited = { action: 'person.changeMail', entity: 'person', entityId: personId, before, after }
    await recordAudit(parts, { ...audited, personId: byPersonId }, transaction)
  })
  parts.bus.publish('person.changed', { personId })
  return readPerson(parts, personId)
}

async function refuseKnownAddress(email: string, except: number | null, transaction: Transaction): Promise<void> {
  const known = await Person.findOne({ where: { email }, transaction })
  if (known && known.id !== except) throw invalidInput([{ path: 'email', message: 'belongs to another person' }])
}

const needsAddress = () => invalidInput([{ path: 'email', message: 'is needed by somebody who signs in' }])

async function checkDeputy(personId: number, deputyId: number | null, transaction: Transaction): Promise<void> {
  if (deputyId === null) return
  const deputy = await Person.findByPk(deputyId, { transaction })
  const fault =
    deputyId === personId
      ? 'must be somebody else'
      : !deputy?.email || deputy.disabledAt
        ? 'must be somebody to whom e-mails go'
        : null
  if (fault) throw invalidInput([{ path: 'deputyId', message: fault }])
}

const ahead = ({ clock }: Pick<Parts, 'clock'>) => ({ endsAt: { [Op.gt]: clock.now() } })

async function mailSideOf(parts: Parts, person: Person, transaction: Transaction): Promise<object> {
  const absences = await Absence.findAll({ where: { personId: person.id, ...ahead(parts) }, transaction })
  const { name, email, team, hours, deputyId } = person
  return {
    name,
    email,
    team,
    hours,
    deputyId,
    absences: absences.map(({ startsAt, endsAt }) => ({ startsAt, endsAt })),
  }
}

async function present(parts: Pick<Parts, 'clock'>, people: Person[]): Promise<PersonView[]> {
  const ids = people.map(({ id }) => id)
  const [absences, members, deputies] = await Promise.all([
    Absence.findAll({ where: { personId: ids, ...ahead(parts) }, order: [['startsAt', 'ASC']] }),
    ListMember.findAll({ where: { personId: ids } }),
    Person.findAll({ where: { id: people.flatMap(({ deputyId }) => deputyId ?? []) }, attributes: ['id', 'name'] }),
  ])
  const lists = await DistributionList.findAll({
    where: { id: members.map(({ listId }) => listId), retiredAt: null },
    order: [['name', 'ASC']],
  })
  return people.map((person) => {
    const { id, version, name, email, role, team, deputyId } = person
    const deputy = deputies.find((one) => one.id === deputyId)
    const on = new Set(members.filter(({ personId }) => personId === id).map(({ listId }) => listId))
    return {
      ...{ id, version, name, email, role, team },
      isDisabled: person.disabledAt !== null,
      hours: timeSpan.shape.hours.catch(null).parse(person.hours),
      deputy: deputy ? { id: deputy.id, name: deputy.name } : null,
      mailHealth: mailHealth.catch('unknown').parse(person.mailHealth),
      absences: absences
        .filter(({ personId }) => personId === id)
        .map((one) => ({ id: one.id, startsAt: one.startsAt.toISOString(), endsAt: one.endsAt.toISOString() })),
      lists: lists
        .filter((list) => on.has(list.id))
        .map((list) => ({ id: list.id, name: list.name, isSafety: Boolean(list.isSafety) })),
    }
  })
}

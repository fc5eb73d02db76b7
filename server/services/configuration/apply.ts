/** Puts people, lists and settings of a file in force, each with its own audit, in the transaction of the whole. */
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import type { Configuration, ConfiguredList, ConfiguredPerson } from '../../../shared/schemas/configuration.ts'
import type { ConfigurationChange } from '../../../shared/schemas/configuration.ts'
import type { Parts } from '../../config/parts.ts'
import { DistributionList, ListMember, Person } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { invalidInput, Refused } from '../problems.ts'
import { settingGroups } from '../settings.ts'
import { putContent } from '../settings/versions.ts'
import { toIds } from './names.ts'

export interface Author {
  personId: number
  reason: string
}

export type Applied = Pick<Configuration, 'settings' | 'people' | 'lists'>

/** People first, for lists name them; settings last, for they name lists. Answers whose sessions are to be looked at. */
export async function applyChanges(
  parts: Parts,
  wanted: Applied,
  changes: ConfigurationChange[],
  by: Author,
  transaction: Transaction,
): Promise<number[]> {
  const of = (kind: ConfigurationChange['kind']) =>
    changes.filter((one) => one.kind === kind && one.applies).map(({ key }) => key)
  const touched: number[] = []
  for (const email of of('people')) {
    const person = wanted.people[email]
    if (person) touched.push(await putPerson(parts, email, person, by, transaction))
  }
  // Deputies may be among those who were just added.
  for (const email of of('people')) {
    const person = wanted.people[email]
    if (person) await putDeputy(email, person.deputy, transaction)
  }
  for (const name of of('lists')) {
    const list = wanted.lists[name]
    if (list) await putList(parts, name, list, by, transaction)
  }
  for (const name of of('settings')) {
    const group = settingGroups.find((one) => one === name)
    if (!group) throw invalidInput([{ path: `settings.${name}`, message: 'is no group of settings of this version' }])
    await putContent(parts, group, await toIds(name, wanted.settings[name] ?? {}, transaction), by, transaction)
  }
  await keepAnAdministrator(by.personId, transaction)
  return touched
}

async function putPerson(
  parts: Parts,
  email: string,
  { deputy: _deputy, isDisabled, ...fields }: ConfiguredPerson,
  { personId: byId }: Author,
  transaction: Transaction,
): Promise<number> {
  if (email !== email.toLowerCase() || !/^[^\s@]+@[^\s@]+$/.test(email)) {
    throw invalidInput([{ path: `people.${email}`, message: 'is no address in small letters' }])
  }
  const now = parts.clock.now()
  const known = await Person.findOne({ where: { email }, lock: true, transaction })
  const before = known && { name: known.name, role: known.role, team: known.team, disabledAt: known.disabledAt }
  const disabledAt = isDisabled ? (known?.disabledAt ?? now) : null
  const person = known
    ? await known.update({ ...fields, disabledAt, version: known.version + 1, updatedAt: now }, { transaction })
    : await Person.create({ ...fields, email, disabledAt, createdAt: now, updatedAt: now }, { transaction })
  const change = { action: known ? 'person.change' : 'person.add', entity: 'person', entityId: person.id }
  await recordAudit(parts, { ...change, personId: byId, before, after: { email, ...fields, isDisabled } }, transaction)
  return person.id
}

async function putDeputy(email: string, deputy: string | null, transaction: Transaction): Promise<void> {
  const found = deputy === null ? null : await Person.findOne({ where: { email: deputy }, transaction })
  if (deputy !== null && (!found || deputy === email)) {
    throw invalidInput([{ path: `people.${email}.deputy`, message: `${deputy} is nobody who could stand in` }])
  }
  await Person.update({ deputyId: found?.id ?? null }, { where: { email }, transaction })
}

async function putList(
  parts: Parts,
  name: string,
  { members, ...fields }: ConfiguredList,
  { personId }: Author,
  transaction: Transaction,
): Promise<void> {
  const now = parts.clock.now()
  const people = await Person.findAll({ where: { email: members.map(({ person }) => person) }, transaction })
  const rows = members.map(({ person, hours, priorities }, position) => {
    const found = people.find(({ email }) => email === person)
    if (!found) throw invalidInput([{ path: `lists.${name}`, message: `${person} is nobody of this port` }])
    return { personId: found.id, position, hours, priorities }
  })
  const known = await DistributionList.findOne({ where: { name, retiredAt: null }, lock: true, transaction })
  const list = known
    ? await known.update({ ...fields, version: known.version + 1, updatedAt: now }, { transaction })
    : await DistributionList.create(
        { ...fields, name, createdAt: now, updatedAt: now, retiredAt: null },
        { transaction },
      )
  await ListMember.destroy({ where: { listId: list.id }, transaction })
  await ListMember.bulkCreate(
    rows.map((row) => ({ ...row, listId: list.id })),
    { transaction },
  )
  const change = { action: known ? 'list.change' : 'list.add', entity: 'list', entityId: list.id }
  await recordAudit(parts, { ...change, personId, after: { name, ...fields, members } }, transaction)
}

/** What was added by a file is taken back: people are disabled, lists go out of use; both stay where others name them. */
export async function takeBack(
  parts: Parts,
  added: ConfigurationChange[],
  { personId }: Author,
  transaction: Transaction,
): Promise<void> {
  const now = parts.clock.now()
  for (const { kind, key } of added) {
    if (kind === 'people') {
      await Person.update({ disabledAt: now, updatedAt: now }, { where: { email: key }, transaction })
      const change = { action: 'person.disable', entity: 'person', entityId: key.slice(0, 80), personId }
      await recordAudit(parts, { ...change, after: { email: key } }, transaction)
    }
    if (kind === 'lists') {
      const where = { name: key, retiredAt: null }
      await DistributionList.update({ retiredAt: now, updatedAt: now }, { where, transaction })
      const change = { action: 'list.retire', entity: 'list', entityId: key.slice(0, 80), personId }
      await recordAudit(parts, { ...change, after: { name: key } }, transaction)
    }
  }
}

/** Nobody could mend anything any more; and nobody locks themselves out by a file. */
async function keepAnAdministrator(personId: number, transaction: Transaction): Promise<void> {
  const where = { role: 'admin' as const, disabledAt: null, passwordHash: { [Op.not]: null } }
  const administrators = await Person.findAll({ where, attributes: ['id'], transaction })
  if (administrators.some(({ id }) => id === personId)) return
  throw new Refused({
    status: 409,
    code: 'configuration.locksOut',
    title: 'Nothing was changed',
    detail:
      'This file would take your own account its role, or disable it. Another administrator can do that on People.',
  })
}

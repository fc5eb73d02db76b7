/** Distribution lists: who is told of what by e-mail. */
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { priority, timeSpan } from '../../shared/schemas/limit.ts'
import type { ListContent, ListView } from '../../shared/schemas/distributionList.ts'
import type { Parts } from '../config/parts.ts'
import { Absence, DistributionList, ListMember, Person } from '../models/index.ts'
import { select } from '../models/sql.ts'
import { recordAudit } from './audit.ts'
import { changedMeanwhile, invalidInput, notFound, Refused } from './problems.ts'
import { inTransaction } from './transaction.ts'

/** Those in use, by name. */
export async function listLists(parts: Pick<Parts, 'clock'>): Promise<ListView[]> {
  const lists = await DistributionList.findAll({
    where: { retiredAt: null },
    order: [
      ['name', 'ASC'],
      ['id', 'ASC'],
    ],
  })
  return present(parts, lists)
}

export async function readList(parts: Pick<Parts, 'clock'>, listId: number): Promise<ListView> {
  const list = await DistributionList.findByPk(listId)
  const [view] = list ? await present(parts, [list]) : []
  if (!view) throw notFound('list', listId)
  return view
}

export async function addList(parts: Parts, content: ListContent, byPersonId: number | null): Promise<ListView> {
  const now = parts.clock.now()
  const { members, ...fields } = content
  const listId = await inTransaction(parts.sequelize, async (transaction) => {
    await checkMembers(content, transaction)
    const list = await DistributionList.create(
      { ...fields, createdAt: now, updatedAt: now, retiredAt: null },
      { transaction },
    )
    await putMembers(list.id, members, transaction)
    const change = { action: 'list.add', entity: 'list', entityId: list.id, after: content }
    await recordAudit(parts, { ...change, personId: byPersonId }, transaction)
    return list.id
  })
  return readList(parts, listId)
}

/** `version`: the one that the person saw; another answers 412. */
export async function changeList(
  parts: Parts,
  listId: number,
  version: number,
  content: ListContent,
  byPersonId: number | null,
): Promise<ListView> {
  await inTransaction(parts.sequelize, async (transaction) => {
    const list = await lockList(parts, listId, version, transaction)
    await checkMembers(content, transaction)
    const before = await contentOf(list, transaction)
    const { members, ...fields } = content
    await list.update({ ...fields, version: version + 1, updatedAt: parts.clock.now() }, { transaction })
    await ListMember.destroy({ where: { listId }, transaction })
    await putMembers(listId, members, transaction)
    const change = { action: 'list.change', entity: 'list', entityId: listId, before, after: content }
    await recordAudit(parts, { ...change, personId: byPersonId }, transaction)
  })
  return readList(parts, listId)
}

/** Out of use; one that limits still name is needed. */
export async function retireList(
  parts: Parts,
  listId: number,
  version: number,
  byPersonId: number | null,
): Promise<void> {
  await inTransaction(parts.sequelize, async (transaction) => {
    const list = await lockList(parts, listId, version, transaction)
    const users = await limitsThatName(parts, listId, transaction)
    if (users.length > 0) throw stillNamed(users)
    const now = parts.clock.now()
    await list.update({ retiredAt: now, version: version + 1, updatedAt: now }, { transaction })
    const change = { action: 'list.retire', entity: 'list', entityId: listId }
    await recordAudit(parts, { ...change, personId: byPersonId }, transaction)
  })
}

/** A person takes themselves off; a safety list needs an operator. */
export async function leaveList(parts: Parts, listId: number, personId: number): Promise<void> {
  await inTransaction(parts.sequelize, async (transaction) => {
    const list = await DistributionList.findByPk(listId, { lock: true, transaction })
    if (!list || list.retiredAt) throw notFound('list', listId)
    if (list.isSafety) throw needsOperator()
    const left = await ListMember.destroy({ where: { listId, personId }, transaction })
    if (left === 0) return
    await list.update({ version: list.version + 1, updatedAt: parts.clock.now() }, { transaction })
    const change = { action: 'list.leave', entity: 'list', entityId: listId, before: { personId } }
    await recordAudit(parts, { ...change, personId }, transaction)
  })
}

async function lockList(
  parts: Pick<Parts, 'clock'>,
  listId: number,
  version: number,
  transaction: Transaction,
): Promise<DistributionList> {
  const list = await DistributionList.findByPk(listId, { lock: true, transaction })
  if (!list || list.retiredAt) throw notFound('list', listId)
  if (list.version !== version) throw changedMeanwhile('list', list.version, (await present(parts, [list])).at(0))
  return list
}

async function checkMembers({ members }: ListContent, transaction: Transaction): Promise<void> {
  const ids = members.map(({ personId }) => personId)
  const known = await Person.findAll({ where: { id: ids, disabledAt: null }, attributes: ['id'], transaction })
  const faults = ids.flatMap((id, n) => {
    const path = `members.${n}.personId`
    if (ids.indexOf(id) !== n) return [{ path, message: 'is on the list already' }]
    return known.some((person) => person.id === id) ? [] : [{ path, message: 'is not a person of this port' }]
  })
  if (faults.length > 0) throw invalidInput(faults)
}

async function putMembers(listId: number, members: ListContent['members'], transaction: Transaction): Promise<void> {
  const rows = members.map((member, position) => ({ listId, position, ...member }))
  if (rows.length > 0) await ListMember.bulkCreate(rows, { transaction })
}

const memberShape = { hours: timeSpan.shape.hours, priorities: priority.array() }

async function contentOf(list: DistributionList, transaction: Transaction): Promise<ListContent> {
  const members = await ListMember.findAll({ where: { listId: list.id }, order: [['position', 'ASC']], transaction })
  const { name, purpose, isSafety } = list
  const plain = members.map(({ personId, hours, priorities }) => ({ personId, hours, priorities }))
  return { name, purpose, isSafety: Boolean(isSafety), members: plain }
}

async function present({ clock }: Pick<Parts, 'clock'>, lists: DistributionList[]): Promise<ListView[]> {
  const members = await ListMember.findAll({
    where: { listId: lists.map(({ id }) => id) },
    order: [['position', 'ASC']],
  })
  const ids = [...new Set(members.map(({ personId }) => personId))]
  const now = clock.now()
  const [people, absences] = await Promise.all([
    Person.findAll({ where: { id: ids } }),
    Absence.findAll({ where: { personId: ids, startsAt: { [Op.lte]: now }, endsAt: { [Op.gt]: now } } }),
  ])
  return lists.map((list) => ({
    id: list.id,
    version: list.version,
    name: list.name,
    purpose: list.purpose,
    isSafety: Boolean(list.isSafety),
    retiredAt: list.retiredAt?.toISOString() ?? null,
    members: members
      .filter(({ listId }) => listId === list.id)
      .flatMap(({ personId, position, hours, priorities }) => {
        const person = people.find(({ id }) => id === personId)
        if (!person) return []
        const { id, name, email, mailHealth } = person
        const isAbsent = absences.some((absence) => absence.personId === id)
        return [
          {
            ...{ personId, position },
            hours: memberShape.hours.parse(hours),
            priorities: memberShape.priorities.parse(priorities),
            person: { id, name, email, mailHealth, isAbsent },
          },
        ]
      }),
  }))
}

/** Limits in use whose current version sends to this list. */
async function limitsThatName({ sequelize }: Parts, listId: number, transaction: Transaction): Promise<number[]> {
  const rows = await select<{ id: number }>(
    sequelize,
    `SELECT l.id FROM limits l JOIN limitVersions v ON v.id = l.currentVersionId
     WHERE l.retiredAt IS NULL AND JSON_CONTAINS(JSON_EXTRACT(v.steps, '$.steps[*].listIds[*]'), :listId)`,
    { listId: String(listId) },
    transaction,
  )
  return rows.map(({ id }) => id)
}

const stillNamed = (limitIds: number[]): Refused =>
  new Refused({
    status: 409,
    code: 'list.inUse',
    title: 'The list is in use',
    detail: `Limits still send to it: ${limitIds.join(', ')}. Give them another list first.`,
  })

const needsOperator = (): Refused =>
  new Refused({
    status: 403,
    code: 'list.needsOperator',
    title: 'An operator takes you off this list',
    detail: 'It is a safety list. Ask the harbour watch.',
  })

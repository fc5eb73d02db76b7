/** What is asked of people before an e-mail goes to them. */
import type { Transaction } from 'sequelize'
import { timeSpan } from '../../../shared/schemas/limit.ts'
import { Absence, DistributionList, ListMember, Person } from '../../models/index.ts'
import { Op } from 'sequelize'
import type { Member, Reachable } from './recipients.ts'

/** All of them: a port has hundreds, and deputies may be anybody. */
export async function reachablePeople(at: Date, transaction: Transaction): Promise<Map<number, Reachable>> {
  const [people, absences] = await Promise.all([
    Person.findAll({ transaction }),
    Absence.findAll({ where: { startsAt: { [Op.lte]: at }, endsAt: { [Op.gt]: at } }, transaction }),
  ])
  const absent = new Set(absences.map(({ personId }) => personId))
  return new Map(
    people.map(({ id, name, email, disabledAt, hours, deputyId }) => [
      id,
      {
        id,
        name,
        email,
        isDisabled: disabledAt !== null,
        hours: timeSpan.shape.hours.catch(null).parse(hours),
        isAbsent: absent.has(id),
        deputyId,
      },
    ]),
  )
}

/** In the order of the lists and of their members; a list out of use has none. */
export async function membersOf(listIds: number[], transaction: Transaction): Promise<Member[]> {
  const lists = await DistributionList.findAll({ where: { id: listIds, retiredAt: null }, transaction })
  const inUse = new Set(lists.map(({ id }) => id))
  const rows = await ListMember.findAll({
    where: { listId: [...inUse] },
    order: [
      ['position', 'ASC'],
      ['personId', 'ASC'],
    ],
    transaction,
  })
  return listIds.flatMap((listId) => rows.filter((row) => row.listId === listId))
}

/** Where a setting holds the number of a row, the file holds its name: numbers belong to one database alone. */
import type { Transaction } from 'sequelize'
import { DistributionList, Station } from '../../models/index.ts'
import { invalidInput } from '../problems.ts'

type Plain = Record<string, unknown>

interface Reference {
  group: string
  /** In the database, and in the file. */
  id: string
  name: string
  nameOf(id: number, transaction?: Transaction): Promise<string | undefined>
  idOf(name: string, transaction?: Transaction): Promise<number | undefined>
}

const within = (transaction?: Transaction) => (transaction ? { transaction } : {})

const references: Reference[] = [
  {
    group: 'watch',
    id: 'leadStationId',
    name: 'leadStation',
    nameOf: async (id, transaction) => (await Station.findByPk(id, within(transaction)))?.code,
    idOf: async (code, transaction) => (await Station.findOne({ where: { code }, ...within(transaction) }))?.id,
  },
  {
    group: 'mail',
    id: 'heartbeatListId',
    name: 'heartbeatList',
    nameOf: async (id, transaction) => (await DistributionList.findByPk(id, within(transaction)))?.name,
    idOf: async (name, transaction) =>
      (await DistributionList.findOne({ where: { name, retiredAt: null }, ...within(transaction) }))?.id,
  },
]

export async function toNames(group: string, content: Plain, transaction?: Transaction): Promise<Plain> {
  const reference = references.find((one) => one.group === group)
  if (!reference) return content
  const { [reference.id]: id, ...rest } = content
  const name = typeof id === 'number' ? await reference.nameOf(id, transaction) : undefined
  return { ...rest, [reference.name]: name ?? null }
}

export async function toIds(group: string, content: Plain, transaction: Transaction): Promise<Plain> {
  const reference = references.find((one) => one.group === group)
  if (!reference) return content
  const { [reference.name]: name, ...rest } = content
  if (typeof name !== 'string') return { ...rest, [reference.id]: null }
  const id = await reference.idOf(name, transaction)
  if (id === undefined) {
    throw invalidInput([{ path: `settings.${group}.${reference.name}`, message: `there is no ${name} here` }])
  }
  return { ...rest, [reference.id]: id }
}

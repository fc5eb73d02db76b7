/** The configuration as it stands, without a secret and without a number of this database. */
import type { Transaction } from 'sequelize'
import type { ConfiguredList, ConfiguredPerson } from '../../../shared/schemas/configuration.ts'
import type { ConfigurationContent } from '../../../shared/configuration/compare.ts'
import { recipients, timeSpan } from '../../../shared/schemas/limit.ts'
import type { Parts } from '../../config/parts.ts'
import {
  Deployment,
  DeploymentSensor,
  DistributionList,
  Limit,
  LimitVersion,
  ListMember,
  Person,
  Sensor,
  Station,
  StationSettings,
} from '../../models/index.ts'
import { settingGroups, settingInForce } from '../settings.ts'
import { toNames } from './names.ts'

type Plain = Record<string, unknown>

export async function readContent(parts: Parts, transaction?: Transaction): Promise<ConfigurationContent> {
  const within = transaction ? { transaction } : {}
  const people = await Person.findAll(within)
  const settings: Record<string, Plain> = {}
  for (const group of settingGroups) {
    settings[group] = await toNames(group, { ...(await settingInForce(parts, group, transaction)) }, transaction)
  }
  return {
    settings,
    people: peopleOf(people),
    lists: await listsOf(people, within),
    stations: await stationsOf(within),
    limits: await limitsOf(within),
  }
}

/** Somebody without an address has no name of their own in a file, and is left out. */
function peopleOf(people: Person[]): Record<string, ConfiguredPerson> {
  const byId = new Map(people.map((person) => [person.id, person]))
  return Object.fromEntries(
    people.flatMap((person): [string, ConfiguredPerson][] => {
      const { email, name, role, team, timeZone, deputyId, disabledAt } = person
      if (email === null) return []
      const hours = timeSpan.shape.hours.catch(null).parse(person.hours)
      const deputy = (deputyId === null ? null : byId.get(deputyId)?.email) ?? null
      return [[email, { name, role, team, timeZone, hours, deputy, isDisabled: disabledAt !== null }]]
    }),
  )
}

async function listsOf(people: Person[], within: object): Promise<Record<string, ConfiguredList>> {
  const lists = await DistributionList.findAll({ where: { retiredAt: null }, ...within })
  const members = await ListMember.findAll({ order: [['position', 'ASC']], ...within })
  const emails = new Map(people.map(({ id, email }) => [id, email]))
  return Object.fromEntries(
    lists.map(({ id, name, purpose, isSafety }) => [
      name,
      {
        purpose,
        isSafety: Boolean(isSafety),
        members: members
          .filter(({ listId }) => listId === id)
          .flatMap((member) => {
            const person = emails.get(member.personId)
            const { hours, priorities } = member
            return person ? [{ person, hours, priorities }] : []
          }),
      },
    ]),
  )
}

/** Numbers of rows, their times and versions belong to this database alone. */
const ofThisDatabase = new Set(['id', 'version', 'createdAt', 'updatedAt', 'retiredAt', 'stationId', 'sensorId', 'deploymentId', 'recordedAt', 'authorId', 'position']) // prettier-ignore
const plain = (row: object): Plain =>
  Object.fromEntries(
    Object.entries(row).filter(([name, value]) => !ofThisDatabase.has(name) && !(value instanceof Date)),
  )

async function stationsOf(within: object): Promise<Record<string, Plain>> {
  const stations = await Station.findAll({ where: { retiredAt: null }, ...within })
  const found = await Promise.all(
    stations.map(async (station): Promise<[string, Plain]> => {
      const where = { stationId: station.id }
      const newest = { order: [['validFrom', 'DESC'], ['id', 'DESC']] satisfies [string, string][], ...within } // prettier-ignore
      const settings = await StationSettings.findOne({ where, ...newest })
      const deployment = await Deployment.findOne({ where: { ...where, replacesId: null }, ...newest })
      const sensors = deployment
        ? await DeploymentSensor.findAll({
            where: { deploymentId: deployment.id },
            order: [['position', 'ASC']],
            ...within,
          })
        : []
      const instruments = await Sensor.findAll({ where, ...within })
      return [
        station.code,
        {
          ...plain(station.get()),
          settings: settings?.content ?? null,
          array: deployment && {
            ...plain(deployment.get()),
            sensors: sensors.map((sensor) => ({
              ...plain(sensor.get()),
              serial: instruments.find(({ id }) => id === sensor.sensorId)?.serial ?? null,
            })),
          },
        },
      ]
    }),
  )
  return Object.fromEntries(found)
}

async function limitsOf(within: object): Promise<Record<string, Plain>> {
  const limits = await Limit.findAll({ where: { retiredAt: null }, order: [['id', 'ASC']], ...within })
  const versions = await LimitVersion.findAll({ where: { id: limits.flatMap(({ currentVersionId }) => currentVersionId ?? []) }, ...within }) // prettier-ignore
  const stations = await Station.findAll({ attributes: ['id', 'code'], ...within })
  const lists = await DistributionList.findAll({ attributes: ['id', 'name'], ...within })
  const nameOf = (id: number): string => lists.find((list) => list.id === id)?.name ?? `list ${id}`
  const taken = new Map<string, number>()
  return Object.fromEntries(
    limits.flatMap((limit): [string, Plain][] => {
      const version = versions.find(({ id }) => id === limit.currentVersionId)
      if (!version) return []
      const code = stations.find(({ id }) => id === limit.subjectId)?.code
      const subject = limit.subjectKind === 'station' ? code : limit.subjectId
      const { title, condition, priority, schedule, note, toCheck } = version
      const { steps, ...rest } = recipients.parse(version.steps)
      const told = { ...rest, steps: steps.map(({ listIds, ...step }) => ({ ...step, lists: listIds.map(nameOf) })) }
      const first = JSON.stringify(condition).match(/"quantity":"(\w+)"/)?.[1] ?? 'condition'
      const name = [limit.subjectKind, subject, first].filter((part) => part !== null).join(' ')
      const count = (taken.get(name) ?? 0) + 1
      taken.set(name, count)
      return [[count === 1 ? name : `${name} ${count}`, { title, condition, priority, told, schedule, note, toCheck }]]
    }),
  )
}

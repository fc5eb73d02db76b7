/** Stations as their set-up shows them: what is in force, what is ordered for later, what hangs on them. */
import { Op } from 'sequelize'
import type { StationRecord, StationSettingsRecord } from '../../../shared/schemas/stationSetUp.ts'
import { areaPolygon } from '../../../shared/schemas/stationSetUp.ts'
import { stationSettingsContent } from '../../../shared/schemas/stationSettings.ts'
import type { Parts } from '../../config/parts.ts'
import type { Station } from '../../models/index.ts'
import { Deployment, DeploymentDraft, Limit, Person, StationKey, StationSettings } from '../../models/index.ts'
import { select } from '../../models/sql.ts'

/** As rows come from the database: by time of coming into force, of equals the one noted last first. */
export const newestFirst: [string, string][] = [
  ['validFrom', 'DESC'],
  ['id', 'DESC'],
]

/** Names of people by their number; those that are unknown are null. */
export async function namesOf(ids: readonly (number | null)[]): Promise<(id: number | null) => string | null> {
  const wanted = [...new Set(ids.filter((id) => id !== null))]
  const people = wanted.length === 0 ? [] : await Person.findAll({ where: { id: wanted } })
  const names = new Map(people.map(({ id, name }) => [id, name]))
  return (id) => (id === null ? null : (names.get(id) ?? null))
}

export async function presentSettings(
  { clock }: Pick<Parts, 'clock'>,
  station: Pick<Station, 'id' | 'sampleRate'>,
): Promise<StationSettingsRecord[]> {
  const versions = await StationSettings.findAll({ where: { stationId: station.id }, order: newestFirst })
  const nameOf = await namesOf(versions.map(({ authorId }) => authorId))
  const now = clock.now()
  const inForce = versions.find(({ validFrom }) => validFrom <= now)
  return versions.map((version) => ({
    id: version.id,
    validFrom: version.validFrom.toISOString(),
    isInForce: version === inForce,
    sampleRate: version.sampleRate ?? station.sampleRate,
    content: stationSettingsContent.parse(version.content),
    author: nameOf(version.authorId),
    reason: version.reason,
  }))
}

interface NumberedDeployment {
  id: number
  number: number
  validFrom: string
}

/** The versions of a station counted by time; corrections of the past are not among them. */
export async function numberedDeployments(stationId: number): Promise<NumberedDeployment[]> {
  const rows = await Deployment.findAll({ where: { stationId, replacesId: null }, order: newestFirst })
  return rows.map(({ id, validFrom }, n) => ({ id, number: rows.length - n, validFrom: validFrom.toISOString() }))
}

export async function presentStationRecord(parts: Parts, station: Station): Promise<StationRecord> {
  const now = parts.clock.now()
  const [settings, deployments, drafts, validKeys, limits, firstReadingAt] = await Promise.all([
    presentSettings(parts, station),
    numberedDeployments(station.id),
    DeploymentDraft.count({ where: { stationId: station.id, retiredAt: null } }),
    StationKey.count({
      where: {
        stationId: station.id,
        revokedAt: null,
        [Op.or]: [{ validUntil: null }, { validUntil: { [Op.gt]: now } }],
      },
    }),
    Limit.count({ where: { subjectKind: 'station', subjectId: station.id, retiredAt: null } }),
    firstReading(parts, station.id),
  ])
  const { id, version, code, shortName, name, latitude, longitude, datumName, datumOffset, notes, state } = station
  const inForce = settings.find((one) => one.isInForce) ?? null
  const isComing = ({ validFrom }: { validFrom: string }): boolean => Date.parse(validFrom) > now.getTime()
  return {
    ...{ id, version, code, shortName, name, latitude, longitude, datumName, datumOffset, notes },
    datumSurveyedOn: station.datumSurveyedOn ?? null,
    staleAfterSeconds: station.staleAfterSeconds,
    areaPolygon: areaPolygon.nullable().parse(station.areaPolygon ?? null),
    state: station.retiredAt ? 'retired' : state,
    retiredAt: station.retiredAt?.toISOString() ?? null,
    createdAt: station.createdAt.toISOString(),
    updatedAt: station.updatedAt.toISOString(),
    sampleRate: inForce?.sampleRate ?? station.sampleRate,
    settings: inForce,
    comingSettings: settings.filter(isComing).reverse(),
    deployment: deployments.find((one) => !isComing(one)) ?? null,
    comingDeployments: deployments.filter(isComing).reverse(),
    drafts,
    validKeys,
    limits,
    firstReadingAt: firstReadingAt?.toISOString() ?? null,
  }
}

async function firstReading({ sequelize }: Pick<Parts, 'sequelize'>, stationId: number): Promise<Date | null> {
  const [row] = await select<{ first: Date | null }>(
    sequelize,
    `SELECT LEAST(IFNULL(b.first, f.first), IFNULL(f.first, b.first)) AS first
     FROM (SELECT MIN(startsAt) AS first FROM readingBlocks WHERE stationId = :stationId) b,
          (SELECT MIN(startsAt) AS first FROM frames WHERE stationId = :stationId) f`,
    { stationId },
  )
  return row?.first ? new Date(row.first) : null
}

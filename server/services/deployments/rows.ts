/** Deployments and their sensors between the database and what is shown. */
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import type { DeploymentDraftContent, DeploymentRecord, PlacedSensor } from '../../../shared/schemas/stationSetUpDeployments.ts' // prettier-ignore
import { sensorPosition } from '../../../shared/schemas/stationSetUpDeployments.ts'
import type { Parts } from '../../config/parts.ts'
import { Deployment, DeploymentSensor, Sensor } from '../../models/index.ts'
import { notFound } from '../problems.ts'
import { namesOf } from '../stationSetUp/present.ts'

const newestFirst: [string, string][] = [
  ['validFrom', 'DESC'],
  ['id', 'DESC'],
]

/** All versions of a station, newest first; corrections of the past stand behind what they correct. */
export async function deploymentRecords(
  { clock }: Pick<Parts, 'clock'>,
  stationId: number,
): Promise<DeploymentRecord[]> {
  const rows = await Deployment.findAll({ where: { stationId }, order: newestFirst })
  const versions = rows.filter(({ replacesId }) => replacesId === null)
  const [sensors, nameOf] = await Promise.all([sensorsOf(rows), namesOf(rows.map(({ authorId }) => authorId))])
  const now = clock.now()
  const current = versions.find(({ validFrom }) => validFrom <= now)
  return rows.map((row) => {
    const corrected = row.replacesId === null ? row : (versions.find(({ id }) => id === row.replacesId) ?? row)
    const place = versions.indexOf(corrected)
    return {
      id: row.id,
      number: versions.length - place,
      validFrom: row.validFrom.toISOString(),
      validUntil: place > 0 ? versions[place - 1].validFrom.toISOString() : null,
      isInForce: row === current,
      recordedAt: row.recordedAt.toISOString(),
      replacesId: row.replacesId,
      waterDepth: row.waterDepth,
      levelOfBed: row.levelOfBed,
      surveyedOn: row.surveyedOn ?? null,
      notes: row.notes,
      author: nameOf(row.authorId),
      reason: row.reason,
      resolved: row.resolved ?? [],
      sensors: sensors.filter(({ deploymentId }) => deploymentId === row.id).map(({ deploymentId: _, ...sensor }) => sensor), // prettier-ignore
    }
  })
}

async function sensorsOf(deployments: readonly Deployment[]) {
  const places = await DeploymentSensor.findAll({
    where: { deploymentId: deployments.map(({ id }) => id) },
    order: [['position', 'ASC']],
  })
  const instruments = await Sensor.findAll({ where: { id: places.map(({ sensorId }) => sensorId) } })
  const known = new Map(instruments.map((sensor) => [sensor.id, sensor]))
  return places.map((place) => {
    const { deploymentId, sensorId, letter, east, north, heightAboveBed, positionSd, clockSd, scale, offset } = place
    const surveyed = sensorPosition.nullable().parse(place.surveyed ?? null)
    return {
      deploymentId,
      sensorId,
      ...{ letter, east, north, heightAboveBed, positionSd, clockSd, scale, offset },
      pressureKind: place.pressureKind,
      serial: known.get(sensorId)?.serial ?? String(sensorId),
      kind: known.get(sensorId)?.kind ?? 'pressure',
      position: surveyed ?? ({ by: 'grid', east, north } as const),
    }
  })
}

export async function deploymentRecord(
  parts: Pick<Parts, 'clock'>,
  stationId: number,
  deploymentId: number,
): Promise<DeploymentRecord> {
  const record = (await deploymentRecords(parts, stationId)).find(({ id }) => id === deploymentId)
  if (!record) throw notFound('deployment', deploymentId)
  return record
}

/** What a draft begins with when it goes on from a version. */
export const contentOf = (record: DeploymentRecord): DeploymentDraftContent => ({
  waterDepth: record.waterDepth,
  levelOfBed: record.levelOfBed,
  surveyedOn: record.surveyedOn,
  notes: record.notes,
  sensors: record.sensors.map(({ sensorId: _, east: __, north: ___, ...sensor }) => sensor),
})

/** The instruments by their serials; one that is not in the register yet is entered, one in another kind is refused. */
export async function registerSensors(
  parts: Pick<Parts, 'clock'>,
  stationId: number,
  sensors: readonly PlacedSensor[],
  transaction: Transaction,
): Promise<Map<string, Sensor>> {
  const known = await Sensor.findAll({
    where: { stationId, serial: { [Op.in]: sensors.map(({ serial }) => serial) } },
    transaction,
  })
  const now = parts.clock.now()
  const bySerial = new Map(known.map((sensor) => [sensor.serial, sensor]))
  for (const { serial, kind } of sensors) {
    if (bySerial.has(serial)) continue
    bySerial.set(
      serial,
      await Sensor.create({ stationId, serial, kind, dueDates: null, createdAt: now, updatedAt: now, retiredAt: null }, { transaction }), // prettier-ignore
    )
  }
  return bySerial
}

/** The demonstration's stations with settings, instruments, survey and one key each for the simulator. */
import { createHash, randomBytes } from 'node:crypto'
import { join } from 'node:path'
import type { Transaction } from 'sequelize'
import { z } from 'zod'
import { demonstrationStations } from '../../shared/demonstration/stations.ts'
import type { DemonstrationStation } from '../../shared/demonstration/stations.ts'
import { defaultEstimateSettings } from '../../shared/waves/window.ts'
import type { Parts } from '../config/parts.ts'
import { Deployment, DeploymentSensor, Sensor, Station, StationKey, StationSettings } from '../models/index.ts'
import { recordAudit } from '../services/audit.ts'
import { stationKeysFile } from '../setup/demonstrationPeople.ts'
import { readSecrets, writeSecrets } from './secretsFile.ts'

const positionSd = 0.05
const clockSd = 0.002
/** Before everything that the demonstration invents of its past. */
const surveyedBeforeMilliseconds = 400 * 24 * 3600_000

const keysShape = z.record(z.string(), z.string().regex(/^[0-9a-f]{12}\.[\w-]{43}$/))

/** Station code to key. The file comes first: after a stop in between it is used again. */
export async function demonstrationKeys({ environment }: Pick<Parts, 'environment'>): Promise<Record<string, string>> {
  const file = join(environment.dataFolder, stationKeysFile)
  const kept = await readSecrets(file, keysShape)
  if (kept && demonstrationStations.every(({ code }) => kept[code])) return kept
  const key = (): string => `${randomBytes(6).toString('hex')}.${randomBytes(32).toString('base64url')}`
  const made = Object.fromEntries(demonstrationStations.map(({ code }) => [code, key()]))
  await writeSecrets(file, made)
  return made
}

/** Adds what is missing of a station. */
export async function seedStation(
  parts: Pick<Parts, 'clock'>,
  described: DemonstrationStation,
  key: string,
  transaction: Transaction,
): Promise<Station> {
  const known = await Station.findOne({ where: { code: described.code }, transaction })
  const station = known ?? (await addStation(parts, described, transaction))
  const [prefix = '', secret = ''] = key.split('.')
  if (!(await StationKey.findOne({ where: { prefix }, transaction }))) {
    const secretHash = createHash('sha256').update(secret).digest()
    await StationKey.create(
      { stationId: station.id, prefix, secretHash, createdAt: parts.clock.now() },
      { transaction },
    )
  }
  return station
}

async function addStation(
  parts: Pick<Parts, 'clock'>,
  described: DemonstrationStation,
  transaction: Transaction,
): Promise<Station> {
  const now = parts.clock.now()
  const since = new Date(now.getTime() - surveyedBeforeMilliseconds)
  const reason = 'Demonstration'
  const { code, shortName, name, latitude, longitude, sampleRate, staleAfterSeconds, waterDepth } = described
  const station = await Station.create(
    { code, shortName, name, latitude, longitude, sampleRate, staleAfterSeconds, createdAt: now, updatedAt: now },
    { transaction },
  )
  const stationId = station.id
  const content = {
    windowSeconds: 1200,
    hopSeconds: 60,
    graceSeconds: 10,
    landSectors: described.landSectors,
    estimate: defaultEstimateSettings,
  }
  await StationSettings.create({ stationId, validFrom: since, content, reason }, { transaction })
  const deployment = await Deployment.create(
    { stationId, validFrom: since, recordedAt: now, waterDepth, levelOfBed: -waterDepth, reason },
    { transaction },
  )
  for (const [position, { letter, serial, kind, east, north, heightAboveBed }] of described.sensors.entries()) {
    const sensor = await Sensor.create({ stationId, serial, kind, createdAt: now, updatedAt: now }, { transaction })
    const place = { position, letter, east, north, heightAboveBed, positionSd, clockSd }
    await DeploymentSensor.create({ deploymentId: deployment.id, sensorId: sensor.id, ...place }, { transaction })
  }
  const change = { action: 'station.add', entity: 'station', entityId: stationId, after: { code, name } }
  await recordAudit(parts, { ...change, personId: null }, transaction)
  return station
}

/** Rows that a test needs, with everything it does not care about filled in. */
import { createHash, randomBytes } from 'node:crypto'
import bcrypt from 'bcryptjs'
import type { Clock } from '../../server/config/clock.ts'
import {
  Deployment,
  DeploymentSensor,
  Person,
  Sensor,
  Station,
  StationKey,
  StationSettings,
} from '../../server/models/index.ts'
import type { Role, Team } from '../../shared/schemas/session.ts'
import { defaultEstimateSettings } from '../../shared/waves/window.ts'

interface PersonWanted {
  name?: string
  email?: string
  role?: Role | null
  team?: Team | null
  password?: string
}

export const usualPassword = 'seven grey herons wade'
let made = 0

export async function makePerson(clock: Clock, wanted: PersonWanted = {}): Promise<Person> {
  made += 1
  return Person.create({
    name: wanted.name ?? `Person ${made}`,
    email: wanted.email ?? `person${made}@harbour.example`,
    role: wanted.role === undefined ? 'operator' : wanted.role,
    team: wanted.team ?? null,
    passwordHash: await bcrypt.hash(wanted.password ?? usualPassword, 4),
    createdAt: clock.now(),
    updatedAt: clock.now(),
  })
}

interface StationWanted {
  code?: string
  sampleRate?: number
  waterDepth?: number
  kind?: 'pressure' | 'surface'
  /** Metres from the station's position, one sensor each. */
  positions?: [east: number, north: number][]
  heightAboveBed?: number
}

export interface StationMade {
  station: Station
  settings: StationSettings
  deployment: Deployment
  sensors: DeploymentSensor[]
}

/** A station with settings, instruments and a deployment in force since the start of 2020. */
export async function makeStation(clock: Clock, wanted: StationWanted = {}): Promise<StationMade> {
  made += 1
  const code = wanted.code ?? `S${made}`
  const since = new Date('2020-01-01T00:00:00Z')
  const times = { createdAt: clock.now(), updatedAt: clock.now() }
  const station = await Station.create({
    code,
    shortName: `Station ${code}`,
    name: `Station ${code}`,
    latitude: 47.5,
    longitude: -21,
    sampleRate: wanted.sampleRate ?? 4,
    staleAfterSeconds: 900,
    ...times,
  })
  const stationId = station.id
  const settings = await StationSettings.create({
    stationId,
    validFrom: since,
    content: {
      windowSeconds: 1200,
      hopSeconds: 60,
      graceSeconds: 10,
      landSectors: [],
      estimate: defaultEstimateSettings,
    },
    reason: 'test',
  })
  const waterDepth = wanted.waterDepth ?? 12
  const deployment = await Deployment.create({
    stationId,
    validFrom: since,
    recordedAt: since,
    waterDepth,
    levelOfBed: -waterDepth,
    reason: 'test',
  })
  const kind = wanted.kind ?? 'pressure'
  const positions = wanted.positions ?? [
    [0, 0],
    [20, 5],
    [-8, 18],
  ]
  const sensors: DeploymentSensor[] = []
  for (const [position, [east, north]] of positions.entries()) {
    const sensor = await Sensor.create({ stationId, serial: `${code}-${4100 + position}`, kind, ...times })
    sensors.push(
      await DeploymentSensor.create({
        deploymentId: deployment.id,
        sensorId: sensor.id,
        position,
        letter: `${code}-${position + 1}`,
        east,
        north,
        heightAboveBed: wanted.heightAboveBed ?? 0.5,
        positionSd: 0.05,
        clockSd: 0.002,
      }),
    )
  }
  return { station, settings, deployment, sensors }
}

/** A key of a station; answers the text that the station sends. */
export async function makeStationKey(clock: Clock, stationId: number): Promise<{ row: StationKey; key: string }> {
  const prefix = randomBytes(6).toString('hex')
  const secret = randomBytes(32).toString('base64url')
  const secretHash = createHash('sha256').update(secret).digest()
  const row = await StationKey.create({ stationId, prefix, secretHash, createdAt: clock.now() })
  return { row, key: `${prefix}.${secret}` }
}

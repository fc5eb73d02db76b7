/** All versions of what an estimate depends on, of each station that is computed: read once a wake, asked by time. */
import type { Sequelize } from 'sequelize'
import { stationSettingsContent } from '../../../shared/schemas/stationSettings.ts'
import type { StationSettingsContent } from '../../../shared/schemas/stationSettings.ts'
import type { SensorKind } from '../../../shared/waves/window.ts'
import { ClockOffset, Deployment, Station, StationSettings } from '../../models/index.ts'
import { select } from '../../models/sql.ts'

interface Version {
  /** Milliseconds since 1970 UTC, as all times here. */
  validFrom: number
}

export interface SettingsVersion extends Version {
  id: number
  /** Hz; absent: as the readings are. */
  sampleRate?: number | null
  content: StationSettingsContent
}

export interface DeployedSensor {
  sensorId: number
  letter: string
  kind: SensorKind
  east: number
  north: number
  heightAboveBed: number
  positionSd: number
  clockSd: number
  scale: number
  offset: number
  pressureKind: 'gauge' | 'absolute'
}

export interface DeploymentVersion extends Version {
  id: number
  waterDepth: number
  levelOfBed: number
  sensors: DeployedSensor[]
}

export interface ClockOffsetVersion extends Version {
  sensorId: number
  offsetSeconds: number
  sd: number
  recordedAt: number
}

export interface StationTimeline {
  id: number
  code: string
  settings: SettingsVersion[]
  deployments: DeploymentVersion[]
  clockOffsets: ClockOffsetVersion[]
}

/** The version in force: of those that began at or before the time the latest, and of equals the one noted last. */
export function inForce<V extends Version>(versions: V[], at: number): V | null {
  return versions.reduce<V | null>(
    (best, version) =>
      version.validFrom <= at && (best === null || version.validFrom >= best.validFrom) ? version : best,
    null,
  )
}

interface SensorRow extends DeployedSensor {
  deploymentId: number
}

const sensorsOfDeployments = `
  SELECT d.deploymentId, d.sensorId, d.letter, s.kind, d.east, d.north, d.heightAboveBed, d.positionSd, d.clockSd,
    d.scale, d.\`offset\`, d.pressureKind
  FROM deploymentSensors d JOIN sensors s ON s.id = d.sensorId ORDER BY d.deploymentId, d.position`

/** Stations in service, by id. A correction of a past deployment is for recompute runs and left out here. */
export async function readTimelines(sequelize: Sequelize): Promise<StationTimeline[]> {
  const [stations, settings, deployments, sensors, offsets] = await Promise.all([
    Station.findAll({ where: { retiredAt: null }, order: [['id', 'ASC']], raw: true }),
    StationSettings.findAll({ order: [['id', 'ASC']] }),
    Deployment.findAll({ where: { replacesId: null }, order: [['id', 'ASC']], raw: true }),
    select<SensorRow>(sequelize, sensorsOfDeployments),
    ClockOffset.findAll({ order: [['id', 'ASC']], raw: true }),
  ])
  return stations.map(({ id, code }) => {
    const own = deployments.filter(({ stationId }) => stationId === id)
    const ids = new Set(own.map((deployment) => deployment.id))
    const sensorIds = new Set(sensors.filter((row) => ids.has(row.deploymentId)).map(({ sensorId }) => sensorId))
    return {
      id,
      code,
      settings: settings
        .filter(({ stationId }) => stationId === id)
        .map((row) => ({
          id: row.id,
          validFrom: row.validFrom.getTime(),
          sampleRate: row.sampleRate,
          content: stationSettingsContent.parse(row.content),
        })),
      deployments: own.map((row) => ({
        id: row.id,
        validFrom: row.validFrom.getTime(),
        waterDepth: row.waterDepth,
        levelOfBed: row.levelOfBed,
        sensors: sensors.filter(({ deploymentId }) => deploymentId === row.id),
      })),
      clockOffsets: offsets
        .filter(({ sensorId }) => sensorIds.has(sensorId))
        .map((row) => ({ ...row, validFrom: row.validFrom.getTime(), recordedAt: row.recordedAt.getTime() })),
    }
  })
}

/** A deployment by its number, a correction of the past too; null where the station has none of that number. */
export async function readDeploymentVersion(
  sequelize: Sequelize,
  stationId: number,
  deploymentId: number,
): Promise<DeploymentVersion | null> {
  const row = await Deployment.findOne({ where: { id: deploymentId, stationId }, raw: true })
  if (!row) return null
  const sensors = await select<SensorRow>(sequelize, sensorsOfDeployments)
  const { id, validFrom, waterDepth, levelOfBed } = row
  const own = sensors.filter((sensor) => sensor.deploymentId === id)
  return { id, validFrom: validFrom.getTime(), waterDepth, levelOfBed, sensors: own }
}

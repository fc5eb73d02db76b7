/** Stations with their arrays and settings. */
import { Op } from 'sequelize'
import type { DeploymentView, StationView } from '../../shared/schemas/station.ts'
import type { StationFile } from '../../shared/schemas/stationFile.ts'
import { stationSettingsContent } from '../../shared/schemas/stationSettings.ts'
import type { StationSettingsView } from '../../shared/schemas/stationSettings.ts'
import type { Parts } from '../config/parts.ts'
import { Deployment, Station, StationSettings } from '../models/index.ts'
import { select } from '../models/sql.ts'
import { notFound, Refused } from './problems.ts'

/** What stands in a station's own tables; link and estimates belong to others. */
export type StationFacts = Omit<StationView, 'isLead' | 'link' | 'estimate' | 'lastGood'>

const newestFirst: [string, string][] = [
  ['validFrom', 'DESC'],
  ['id', 'DESC'],
]

/** Stations that are not out of service, by id. */
export async function listStations(parts: Parts): Promise<StationFacts[]> {
  const stations = await Station.findAll({ where: { retiredAt: null }, order: [['id', 'ASC']] })
  return Promise.all(stations.map((station) => factsOf(parts, station)))
}

/** One station, in service or not; throws the 404. */
export async function readStation(parts: Parts, stationId: number): Promise<StationFacts> {
  return factsOf(parts, await stationRow(stationId))
}

async function stationRow(stationId: number): Promise<Station> {
  const station = await Station.findByPk(stationId)
  if (!station) throw notFound('station', stationId)
  return station
}

async function factsOf(parts: Parts, station: Station): Promise<StationFacts> {
  const inForce = { stationId: station.id, validFrom: { [Op.lte]: parts.clock.now() } }
  const [settings, deployment] = await Promise.all([
    StationSettings.findOne({ where: inForce, order: newestFirst }),
    Deployment.findOne({ where: { ...inForce, replacesId: null }, order: newestFirst }),
  ])
  const { id, code, shortName, name, latitude, longitude, state, staleAfterSeconds } = station
  return {
    id,
    code,
    shortName,
    name,
    latitude,
    longitude,
    state,
    staleAfterSeconds,
    sampleRate: settings?.sampleRate ?? station.sampleRate,
    windowSeconds: settings?.content.windowSeconds ?? 1200,
    hopSeconds: settings?.content.hopSeconds ?? 60,
    landSectors: settings?.content.landSectors ?? [],
    deployment: deployment && ((await presentDeployments(parts, [deployment]))[0] ?? null),
  }
}

interface SensorRow {
  deploymentId: number
  letter: string
  serial: string
  kind: 'pressure' | 'surface'
  east: number
  north: number
  heightAboveBed: number
  positionSd: number
}

async function presentDeployments({ sequelize }: Parts, deployments: Deployment[]): Promise<DeploymentView[]> {
  if (deployments.length === 0) return []
  const rows = await select<SensorRow>(
    sequelize,
    `SELECT d.deploymentId, d.letter, s.serial, s.kind, d.east, d.north, d.heightAboveBed, d.positionSd
     FROM deploymentSensors d JOIN sensors s ON s.id = d.sensorId
     WHERE d.deploymentId IN (:ids) ORDER BY d.deploymentId, d.position`,
    { ids: deployments.map(({ id }) => id) },
  )
  return deployments.map(({ id, validFrom, waterDepth }) => ({
    id,
    validFrom: validFrom.toISOString(),
    waterDepth,
    sensors: rows.filter(({ deploymentId }) => deploymentId === id).map(({ deploymentId: _, ...sensor }) => sensor),
  }))
}

/** As a file: the array in force now. Throws 409 for a station without one. */
export async function readStationFile(parts: Parts, stationId: number): Promise<StationFile> {
  const { code, shortName, name, latitude, longitude, sampleRate, staleAfterSeconds, landSectors, deployment } = await readStation(parts, stationId) // prettier-ignore
  if (!deployment) {
    const detail = 'No array is in force at this station: put a deployment in force first.'
    throw new Refused({ status: 409, code: 'station.notDeployed', title: 'No array', detail })
  }
  return {
    ...{ code, shortName, name, latitude, longitude, sampleRate, staleAfterSeconds, landSectors },
    waterDepth: deployment.waterDepth,
    sensors: deployment.sensors.map(({ letter, positionSd, ...sensor }) => ({
      ...sensor,
      id: letter,
      ...(positionSd > 0 && { positionSd }),
    })),
  }
}

/** The surveys of a station, newest first; one that another replaced is not among them. */
export async function listDeployments(parts: Parts, stationId: number): Promise<DeploymentView[]> {
  await stationRow(stationId)
  return presentDeployments(
    parts,
    await Deployment.findAll({ where: { stationId, replacesId: null }, order: newestFirst }),
  )
}

/** The versions of a station's settings, newest first. */
export async function listStationSettings(stationId: number): Promise<StationSettingsView[]> {
  await stationRow(stationId)
  const versions = await StationSettings.findAll({ where: { stationId }, order: newestFirst })
  return versions.map(({ id, validFrom, reason, content }) => ({
    id,
    validFrom: validFrom.toISOString(),
    reason,
    content: stationSettingsContent.parse(content),
  }))
}

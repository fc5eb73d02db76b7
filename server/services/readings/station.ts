/** What storing a station's readings needs to know of it. */
import { Op } from 'sequelize'
import { Deployment, DeploymentSensor, Sensor, Station, StationSettings } from '../../models/index.ts'

export interface StationFacts {
  id: number
  code: string
  state: 'active' | 'maintenance' | 'retired'
  /** Hz. */
  sampleRate: number
  /** The array in force, in the order of its positions; null before the first survey. */
  deployment: { id: number; sensors: StationSensor[] } | null
  windowMs: number
  hopMs: number
  graceMs: number
}

export interface StationSensor {
  id: number
  letter: string
  kind: 'pressure' | 'surface'
}

/** Null for a station that does not exist. */
export async function loadStationFacts(stationId: number, at: Date): Promise<StationFacts | null> {
  const station = await Station.findByPk(stationId)
  if (!station) return null
  const [deployment, settings] = await Promise.all([deploymentInForce(stationId, at), settingsInForce(stationId, at)])
  return {
    id: station.id,
    code: station.code,
    state: station.retiredAt ? 'retired' : station.state,
    sampleRate: settings?.sampleRate ?? station.sampleRate,
    deployment: deployment && { id: deployment.id, sensors: await sensorsOf(deployment.id) },
    windowMs: (settings?.content.windowSeconds ?? 1200) * 1000,
    hopMs: (settings?.content.hopSeconds ?? 60) * 1000,
    graceMs: (settings?.content.graceSeconds ?? 10) * 1000,
  }
}

const newestFirst: [string, string][] = [
  ['validFrom', 'DESC'],
  ['id', 'DESC'],
]

const deploymentInForce = (stationId: number, at: Date) =>
  Deployment.findOne({ where: { stationId, replacesId: null, validFrom: { [Op.lte]: at } }, order: newestFirst })

const settingsInForce = (stationId: number, at: Date) =>
  StationSettings.findOne({ where: { stationId, validFrom: { [Op.lte]: at } }, order: newestFirst })

async function sensorsOf(deploymentId: number): Promise<StationSensor[]> {
  const places = await DeploymentSensor.findAll({ where: { deploymentId }, order: [['position', 'ASC']] })
  const sensors = await Sensor.findAll({ where: { id: places.map(({ sensorId }) => sensorId) } })
  const kinds = new Map(sensors.map(({ id, kind }) => [id, kind]))
  return places.map(({ sensorId, letter }) => ({ id: sensorId, letter, kind: kinds.get(sensorId) ?? 'pressure' }))
}

/** The sample rate in force at a time (ms since 1970 UTC), Hz; null where no version says. */
export async function loadSampleRates(stationId: number): Promise<(timeMs: number) => number | null> {
  const versions = await StationSettings.findAll({ where: { stationId }, order: newestFirst })
  return (timeMs) => versions.find(({ validFrom }) => validFrom.getTime() <= timeMs)?.sampleRate ?? null
}

export interface Deployments {
  /** The deployment in force at a time; null before the first. */
  at(timeMs: number): { id: number; letters: string[] } | null
}

/** All deployments that a station has had. */
export async function loadDeployments(stationId: number): Promise<Deployments> {
  const all = await Deployment.findAll({ where: { stationId, replacesId: null }, order: newestFirst })
  const places = await DeploymentSensor.findAll({
    where: { deploymentId: all.map(({ id }) => id) },
    order: [['position', 'ASC']],
  })
  const known = all.map(({ id, validFrom }) => ({
    id,
    from: validFrom.getTime(),
    letters: places.filter(({ deploymentId }) => deploymentId === id).map(({ letter }) => letter),
  }))
  return { at: (timeMs) => known.find(({ from }) => from <= timeMs) ?? null }
}

/** What was expected of each sensor and what came over the link, by hours. */
import { Op } from 'sequelize'
import type { z } from 'zod'
import type { healthHour } from '../../shared/schemas/station.ts'
import type { Parts } from '../config/parts.ts'
import { Deployment, DeploymentSensor, Station, StationHealthHour, StationSettings } from '../models/index.ts'
import { invalidInput, notFound } from './problems.ts'

export type HealthHour = z.infer<typeof healthHour>

const hourMs = 3_600_000
const longestDays = 31

/**
 * Hours that begin from `from` up to and without `to`, by hour and sensor, from the first that the link ever brought
 * something in until now. An hour in which nothing came is told as such; of the hour under way only what was due by
 * now is expected.
 */
export async function healthHours(
  { clock }: Pick<Parts, 'clock'>,
  stationId: number,
  span: { from: Date; to: Date },
): Promise<HealthHour[]> {
  refuseSpan(span)
  const station = await Station.findByPk(stationId)
  if (!station) throw notFound('station', stationId)
  const first = await StationHealthHour.min<Date | null, StationHealthHour>('hour', { where: { stationId } })
  if (!first) return []
  const now = clock.now().getTime()
  const counted = await countedHours(stationId, span)
  const deployedAt = await deployments(stationId)
  const rateAt = await sampleRates(station)
  const from = Math.ceil(Math.max(span.from.getTime(), new Date(first).getTime()) / hourMs) * hourMs
  const hours: HealthHour[] = []
  for (let hour = from; hour < Math.min(span.to.getTime(), now); hour += hourMs) {
    const due = Math.round(rateAt(hour) * (Math.min(hourMs, now - hour) / 1000))
    const rows = counted.get(hour) ?? []
    const sensors = new Map(deployedAt(hour + hourMs - 1).map(({ sensorId, letter }) => [sensorId, letter]))
    for (const { sensorId } of rows) if (!sensors.has(sensorId)) sensors.set(sensorId, String(sensorId))
    for (const [sensorId, letter] of sensors) {
      hours.push(present(hour, letter, due, rows.find((row) => row.sensorId === sensorId))) // prettier-ignore
    }
  }
  return hours
}

function refuseSpan({ from, to }: { from: Date; to: Date }): void {
  const length = to.getTime() - from.getTime()
  if (length <= 0) throw invalidInput([{ path: 'query.to', message: 'must be after from' }])
  if (length > longestDays * 24 * hourMs) {
    throw invalidInput([{ path: 'query.from', message: `must be at most ${longestDays} days before to` }])
  }
}

async function countedHours(stationId: number, { from, to }: { from: Date; to: Date }) {
  const rows = await StationHealthHour.findAll({ where: { stationId, hour: { [Op.gte]: from, [Op.lt]: to } } })
  const byHour = new Map<number, StationHealthHour[]>()
  for (const row of rows) {
    const hour = row.hour.getTime()
    byHour.set(hour, [...(byHour.get(hour) ?? []), row])
  }
  return byHour
}

/** The sample rate in force at a time, Hz. */
async function sampleRates({ id, sampleRate }: Station): Promise<(timeMs: number) => number> {
  const versions = await StationSettings.findAll({ where: { stationId: id }, order: [['validFrom', 'DESC'], ['id', 'DESC']] }) // prettier-ignore
  return (timeMs) => versions.find(({ validFrom }) => validFrom.getTime() <= timeMs)?.sampleRate ?? sampleRate
}

/** The sensors of the deployment in force at a time, in its order. */
async function deployments(stationId: number): Promise<(timeMs: number) => DeploymentSensor[]> {
  const all = await Deployment.findAll({
    where: { stationId, replacesId: null },
    order: [
      ['validFrom', 'DESC'],
      ['id', 'DESC'],
    ],
  })
  const places = await DeploymentSensor.findAll({
    where: { deploymentId: all.map(({ id }) => id) },
    order: [['position', 'ASC']],
  })
  return (timeMs) => {
    const inForce = all.find(({ validFrom }) => validFrom.getTime() <= timeMs)
    return places.filter(({ deploymentId }) => deploymentId === inForce?.id)
  }
}

const present = (hour: number, letter: string, due: number, row?: StationHealthHour): HealthHour => ({
  hour: new Date(hour).toISOString(),
  letter,
  // A station whose clock is ahead has sent a little of what is not yet due.
  expected: Math.max(due, row?.received ?? 0),
  received: row?.received ?? 0,
  late: row?.late ?? 0,
  repeated: row?.repeated ?? 0,
  conflicting: row?.conflicting ?? 0,
  clockOffset: row?.clockOffset ?? null,
  latencyP95: row?.latencyP95 ?? null,
})

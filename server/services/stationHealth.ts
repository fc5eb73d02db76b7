/** What was expected of each sensor and what came, by hours. */
import { Op } from 'sequelize'
import type { z } from 'zod'
import type { healthHour } from '../../shared/schemas/station.ts'
import type { Parts } from '../config/parts.ts'
import { DeploymentSensor, Station, StationHealthHour } from '../models/index.ts'
import { invalidInput, notFound } from './problems.ts'

export type HealthHour = z.infer<typeof healthHour>

const hourMs = 3_600_000
const longestDays = 31

/**
 * Hours that begin from `from` up to and without `to`, by hour and letter. Of the hour under way only what was due by
 * now is expected. An hour without a row had no reading at all and is not listed.
 */
export async function healthHours(
  { clock }: Pick<Parts, 'clock'>,
  stationId: number,
  { from, to }: { from: Date; to: Date },
): Promise<HealthHour[]> {
  const length = to.getTime() - from.getTime()
  if (length <= 0) throw invalidInput([{ path: 'query.to', message: 'must be after from' }])
  if (length > longestDays * 24 * hourMs) {
    throw invalidInput([{ path: 'query.from', message: `must be at most ${longestDays} days before to` }])
  }
  if (!(await Station.findByPk(stationId))) throw notFound('station', stationId)
  const rows = await StationHealthHour.findAll({
    where: { stationId, hour: { [Op.gte]: from, [Op.lt]: to } },
    order: [
      ['hour', 'ASC'],
      ['sensorId', 'ASC'],
    ],
  })
  const letters = await lettersOf(rows.map(({ sensorId }) => sensorId))
  const now = clock.now().getTime()
  return rows.map((row) => {
    const passed = Math.min(1, Math.max(0, (now - row.hour.getTime()) / hourMs))
    return {
      hour: row.hour.toISOString(),
      letter: letters.get(row.sensorId) ?? String(row.sensorId),
      expected: Math.max(Math.round(row.expected * passed), row.received),
      received: row.received,
      late: row.late,
      repeated: row.repeated,
      conflicting: row.conflicting,
      clockOffset: row.clockOffset,
      latencyP95: row.latencyP95,
    }
  })
}

/** A sensor's letter in its newest deployment. */
async function lettersOf(sensorIds: number[]): Promise<Map<number, string>> {
  const places = await DeploymentSensor.findAll({ where: { sensorId: sensorIds }, order: [['deploymentId', 'ASC']] })
  return new Map(places.map(({ sensorId, letter }) => [sensorId, letter]))
}

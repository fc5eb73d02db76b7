/** A flood of alerts goes into the watch log, once for each. */
import { Op } from 'sequelize'
import { floodSince } from '../../../shared/alerts/order.ts'
import { momentUtc } from '../../../shared/times.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert, LogEntry } from '../../models/index.ts'
import { writeSystemLine } from '../watchLog.ts'

const hourMs = 3_600_000

export interface Flood {
  /** ms since 1970 UTC. */
  since: number
  /** Announced in the last hour. */
  count: number
}

/** Exercises do not count. Null: none runs now. */
export async function currentFlood({ clock }: Pick<Parts, 'clock'>): Promise<Flood | null> {
  const now = clock.now().getTime()
  const rows = await Alert.findAll({
    where: { isExercise: false, announcedAt: { [Op.gt]: new Date(now - hourMs) } },
    attributes: ['announcedAt'],
    order: [['announcedAt', 'ASC']],
  })
  const times = rows.flatMap(({ announcedAt }) => (announcedAt ? [announcedAt.getTime()] : []))
  const since = floodSince(times, now)
  return since === null ? null : { since, count: rows.length }
}

export async function logFlood(parts: Parts): Promise<void> {
  const flood = await currentFlood(parts)
  if (!flood) return
  const where = { kind: 'flood', at: { [Op.gte]: new Date(flood.since) } }
  if (await LogEntry.findOne({ where })) return
  const since = momentUtc(flood.since, parts.clock.now().getTime())
  await writeSystemLine(parts, {
    kind: 'flood',
    text: `Flood of alerts since ${since} UTC: ${flood.count} within the hour.`,
  })
}

/** The demonstration's places, as old as its record, and its tide table, topped up at every start. */
import { placeDraftsOf } from '../../shared/demonstration/places.ts'
import { tideLevel } from '../../shared/demonstration/tide.ts'
import type { Parts } from '../config/parts.ts'
import { Station } from '../models/index.ts'
import { execute, select } from '../models/sql.ts'
import type { Desk } from '../services/alerts.ts'
import { addPlace } from '../services/places.ts'

const dayMs = 24 * 3600_000
/** Before everything that the demonstration invents of its past. */
const describedBeforeMs = 400 * dayMs

/** In the transaction of the lists that they name. Answers their ids by code. */
export async function seedDemonstrationPlaces(
  { parts, now, transaction }: Desk,
  stations: Station[],
  lists: Map<string, number>,
): Promise<Map<string, number>> {
  const places = new Map<string, number>()
  const idOf = (code: string): number => stations.find((station) => station.code === code)?.id ?? 0
  const since = new Date(now - describedBeforeMs)
  for (const draft of placeDraftsOf(idOf, (name) => lists.get(name) ?? null)) {
    places.set(draft.code, await addPlace(parts, draft, null, transaction, since))
  }
  return places
}

/** A tide table has such steps; half an hour between readings would still do. */
const stepMs = 20 * 60_000
const aheadMs = 45 * dayMs
const backMs = 2 * dayMs
const tableSd = 0.05
const rowsAtOnce = 2_000

/** One table for the whole coast, held at each station: two days back and six weeks ahead of every start. */
export async function seedDemonstrationTide({ clock, sequelize }: Pick<Parts, 'clock' | 'sequelize'>): Promise<void> {
  const now = clock.now().getTime()
  const stations = await Station.findAll({ where: { retiredAt: null }, attributes: ['id'], order: [['id', 'ASC']] })
  for (const { id } of stations) {
    const [known] = await select<{ last: Date | null }>(
      sequelize,
      "SELECT MAX(takenAt) AS last FROM auxiliaryReadings WHERE stationId = :id AND kind = 'tide'",
      { id },
    )
    const from = Math.max(now - backMs, (known?.last?.getTime() ?? 0) + 1)
    const rows: [number, string, Date, number, number, number][] = []
    for (let at = Math.ceil(from / stepMs) * stepMs; at <= now + aheadMs; at += stepMs) {
      rows.push([id, 'tide', new Date(at), tideLevel(at), tableSd, 1])
    }
    for (let n = 0; n < rows.length; n += rowsAtOnce) {
      await execute(
        sequelize,
        'INSERT IGNORE INTO auxiliaryReadings (stationId, kind, takenAt, value, sd, qualityFlag) VALUES :rows',
        { rows: rows.slice(n, n + rowsAtOnce) },
      )
    }
  }
}

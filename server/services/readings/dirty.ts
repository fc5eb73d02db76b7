/** Windows that were computed, or may be under computation, and whose readings change now. */
import type { Transaction } from 'sequelize'
import { affectedWindowEnds } from '../../../shared/readings/affectedWindows.ts'
import { execute, select } from '../../models/sql.ts'
import { database } from './database.ts'
import type { StationFacts } from './station.ts'

export type DirtyCause = 'late' | 'import' | 'undo'

export interface Change {
  station: StationFacts
  /** ms since 1970 UTC, without `to`. */
  from: number
  to: number
}

/** The job that computes estimates keeps its watermark under this name, one row a station. */
const estimatesWatermark = { job: 'computeEstimates', subjectKind: 'station' }

/**
 * Up to which window end a station's windows may have been read already: by its watermark, by the end of its durable
 * readings before this change, or because their grace has passed. Without a watermark none has.
 */
export async function loadReadUpTo(
  stations: readonly StationFacts[],
  durableUntil: (stationId: number) => number | null,
  now: number,
  transaction: Transaction,
): Promise<Map<number, number>> {
  if (stations.length === 0) return new Map()
  const rows = await select<{ subjectId: number; doneUpTo: Date | null }>(
    database(),
    `SELECT subjectId, doneUpTo FROM watermarks
     WHERE job = :job AND subjectKind = :subjectKind AND subjectId IN (:ids)`,
    { ...estimatesWatermark, ids: stations.map(({ id }) => id) },
    transaction,
  )
  const watermarks = new Map(rows.map(({ subjectId, doneUpTo }) => [Number(subjectId), doneUpTo]))
  const readUpTo = new Map<number, number>()
  for (const { id, hopMs, graceMs } of stations) {
    const doneUpTo = watermarks.get(id)
    if (!doneUpTo) continue
    const dueByReadings = Math.floor((durableUntil(id) ?? 0) / hopMs) * hopMs
    const dueByTime = Math.floor((now - graceMs) / hopMs) * hopMs
    readUpTo.set(id, Math.max(doneUpTo.getTime(), dueByReadings, dueByTime))
  }
  return readUpTo
}

/** Notes the windows touched by these changes, up to `readUpTo` of their station; answers whether there were any. */
export async function noteDirtyWindows(
  changes: readonly Change[],
  readUpTo: ReadonlyMap<number, number>,
  cause: DirtyCause,
  now: number,
  transaction: Transaction,
): Promise<number> {
  const windows = new Map<string, [number, Date]>()
  for (const { station, from, to } of changes) {
    for (const end of affectedWindowEnds(station, from, to, readUpTo.get(station.id) ?? -Infinity)) {
      windows.set(`${station.id}/${end}`, [station.id, new Date(end)])
    }
  }
  const rows = [...windows.values()].map(([stationId, end]) => [stationId, end, cause, new Date(now)])
  for (let n = 0; n < rows.length; n += 2000) {
    await execute(
      database(),
      `INSERT INTO dirtyWindows (stationId, windowEndsAt, cause, notedAt) VALUES :rows
       ON DUPLICATE KEY UPDATE notedAt = VALUES(notedAt), cause = IF(VALUES(cause) = 'undo', 'undo', cause)`,
      { rows: rows.slice(n, n + 2000) },
      transaction,
    )
  }
  return rows.length
}

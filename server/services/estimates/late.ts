/** Windows noted as late: they wait behind the live ones, the newest first. */
import type { Parts } from '../../config/parts.ts'
import { affectedWindowEnds } from '../../../shared/readings/affectedWindows.ts'
import { execute, select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'
import type { WindowGrid } from './dueWindows.ts'
import type { Origin } from './row.ts'
import { holdMark, moveMark } from './watermark.ts'
import type { Mark } from './watermark.ts'

export interface LateWindow {
  windowEndsAt: number
  origin: Origin
}

const origins: Record<string, Origin> = { late: 'late', import: 'import', undo: 'recompute', recompute: 'recompute' }

/** A note older than this is taken up though no newer readings close the window: nothing more seems to come. */
const settledAfterMs = 60_000

/**
 * The newest late window that is ready: its readings reach its end, or none has come for a minute. Windows after the
 * watermark are left to their turn. Null: none.
 */
export async function newestLate(
  { sequelize, clock }: Parts,
  { stationId, doneUpTo }: Mark,
  durableUntil: number | null,
): Promise<LateWindow | null> {
  if (doneUpTo === null) return null
  const [row] = await select<{ windowEndsAt: Date; cause: string }>(
    sequelize,
    `SELECT windowEndsAt, cause FROM dirtyWindows
     WHERE stationId = :stationId AND windowEndsAt <= :doneUpTo
       AND (windowEndsAt <= :durableUntil OR notedAt <= :settled)
     ORDER BY windowEndsAt DESC LIMIT 1`,
    {
      stationId,
      doneUpTo: new Date(doneUpTo),
      durableUntil: new Date(durableUntil ?? 0),
      settled: new Date(clock.now().getTime() - settledAfterMs),
    },
  )
  return row ? { windowEndsAt: row.windowEndsAt.getTime(), origin: origins[row.cause] ?? 'late' } : null
}

/** Windows that wait to be computed, without those whose turn has not come. */
export async function countLate({ sequelize }: Parts, stationIds: number[]): Promise<number> {
  if (stationIds.length === 0) return 0
  const [row] = await select<{ count: number }>(
    sequelize,
    `SELECT COUNT(*) AS count FROM dirtyWindows d JOIN watermarks w
       ON w.job = 'computeEstimates' AND w.subjectKind = 'station' AND w.subjectId = d.stationId
     WHERE d.stationId IN (:stationIds) AND d.windowEndsAt <= w.doneUpTo`,
    { stationIds },
  )
  return Number(row?.count ?? 0)
}

/** Minutes from `from` up to `to` in which a station has readings; a frame is taken for the minute it starts in. */
async function minutesWithReadings({ sequelize }: Parts, stationId: number, from: number, to: number) {
  const rows = await select<{ minute: number }>(
    sequelize,
    `SELECT DISTINCT minute FROM (
       SELECT TIMESTAMPDIFF(MINUTE, '1970-01-01', startsAt) AS minute FROM readingBlocks
       WHERE stationId = :stationId AND startsAt >= :from AND startsAt < :to
       UNION ALL
       SELECT TIMESTAMPDIFF(MINUTE, '1970-01-01', startsAt) FROM frames
       WHERE stationId = :stationId AND startsAt >= :from AND startsAt < :to) AS minutes ORDER BY minute`,
    { stationId, from: new Date(from), to: new Date(to) },
  )
  return rows.map(({ minute }) => Number(minute) * 60_000)
}

/**
 * Moves the watermark past the windows from `first` to `last` and notes those of them that have readings as late.
 * Windows without any stay a gap.
 */
export async function noteLate(
  parts: Parts,
  mark: Mark,
  { first, last }: { first: number; last: number },
  grid: WindowGrid,
): Promise<number> {
  const minutes = await minutesWithReadings(parts, mark.stationId, first - grid.windowMs, last)
  const touched = minutes.flatMap((minute) => affectedWindowEnds(grid, minute, minute + 60_000, last))
  const ends = [...new Set(touched)].filter((end) => end >= first)
  const notedAt = parts.clock.now()
  await inTransaction(parts.sequelize, async (transaction) => {
    await holdMark(parts, mark, transaction)
    for (let n = 0; n < ends.length; n += 2000) {
      const rows = ends.slice(n, n + 2000).map((end) => [mark.stationId, new Date(end), 'late', notedAt])
      await execute(
        parts.sequelize,
        'INSERT IGNORE INTO dirtyWindows (stationId, windowEndsAt, cause, notedAt) VALUES :rows',
        { rows },
        transaction,
      )
    }
    await moveMark(parts, mark, last, transaction)
  })
  return ends.length
}

/** When a station's first reading begins; null without any. */
export async function firstReadingAt({ sequelize }: Parts, stationId: number): Promise<number | null> {
  const [row] = await select<{ first: Date | null }>(
    sequelize,
    `SELECT MIN(first) AS first FROM (
       SELECT MIN(startsAt) AS first FROM readingBlocks WHERE stationId = :stationId
       UNION ALL SELECT MIN(startsAt) FROM frames WHERE stationId = :stationId) AS firsts`,
    { stationId },
  )
  return row?.first ? new Date(row.first).getTime() : null
}

/** Where the windows of a station begin that never had any: at its first reading. */
export async function beginMark(parts: Parts, mark: Mark, doneUpTo: number): Promise<void> {
  await inTransaction(parts.sequelize, async (transaction) => {
    await holdMark(parts, mark, transaction)
    await moveMark(parts, mark, doneUpTo, transaction)
  })
}

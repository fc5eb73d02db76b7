/** What was estimated before a window, for the tests that hold it against the last day. */
import type { PastFigures } from '../../../shared/waves/recordTests.ts'
import type { Parts } from '../../config/parts.ts'
import { select } from '../../models/sql.ts'

/** A window each half hour for a day, none of which share readings, and the last few for repeated figures. */
const halfHourMs = 30 * 60_000
const halfHours = 48
const lastFew = 6

interface PastRow {
  windowEndsAt: Date
  significantWaveHeight: number | null
  peakPeriod: number | null
  towardDegrees: number | null
}

/** As they stood when the window was computed: the highest revisions there are now. */
export async function pastFigures(
  { sequelize }: Pick<Parts, 'sequelize'>,
  stationId: number,
  windowEndsAt: number,
  hopMs: number,
): Promise<PastFigures[]> {
  const ends = [
    ...Array.from({ length: halfHours }, (_, n) => windowEndsAt - (n + 1) * halfHourMs),
    ...Array.from({ length: lastFew }, (_, n) => windowEndsAt - (n + 1) * hopMs),
  ]
  const rows = await select<PastRow>(
    sequelize,
    `SELECT windowEndsAt, significantWaveHeight, peakPeriod, towardDegrees FROM estimates
     WHERE stationId = :stationId AND runId = 0 AND windowEndsAt IN (:ends) ORDER BY windowEndsAt, revision`,
    { stationId, ends: [...new Set(ends)].map((end) => new Date(end)) },
  )
  const newest = new Map(
    rows.map(({ windowEndsAt: end, towardDegrees: toward, ...row }) => [
      end.getTime(),
      { ...row, at: end.getTime(), toward },
    ]),
  )
  return [...newest.values()].map(({ at, significantWaveHeight, peakPeriod, toward }) => ({
    at,
    significantWaveHeight,
    peakPeriod,
    toward,
  }))
}

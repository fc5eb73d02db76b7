/** The level of the water and the pressure of the air about a window, from what is measured or foretold beside it. */
import type { Parts } from '../../config/parts.ts'
import { select } from '../../models/sql.ts'

type Needs = Pick<Parts, 'sequelize'>

/** Older or newer readings than this say nothing about a window, ms. */
const tideReachMs = 30 * 60_000
const airReachMs = 3 * 3_600_000

async function nearest(
  { sequelize }: Needs,
  stationId: number,
  kinds: string[],
  at: number,
  reachMs: number,
): Promise<number | null> {
  const [row] = await select<{ value: number }>(
    sequelize,
    `SELECT value FROM auxiliaryReadings
     WHERE stationId = :stationId AND kind IN (:kinds) AND takenAt BETWEEN :from AND :to AND qualityFlag IN (1, 2, 3)
     ORDER BY FIELD(kind, :kinds), ABS(TIMESTAMPDIFF(SECOND, takenAt, :at)) LIMIT 1`,
    { stationId, kinds, at: new Date(at), from: new Date(at - reachMs), to: new Date(at + reachMs) },
  )
  return row?.value ?? null
}

/** A measured level goes before a tide table's. Metres above datum; null where neither is there. */
export const tideLevelAt = (parts: Needs, stationId: number, at: number): Promise<number | null> =>
  nearest(parts, stationId, ['waterLevel', 'tide'], at, tideReachMs)

/** Pascals. */
export const airPressureAt = (parts: Needs, stationId: number, at: number): Promise<number | null> =>
  nearest(parts, stationId, ['barometer'], at, airReachMs)

/** The level of the water and the pressure of the air about a window, from what is measured or foretold beside it. */
import type { Parts } from '../../config/parts.ts'
import { select } from '../../models/sql.ts'

type Needs = Pick<Parts, 'sequelize'>
type Kind = 'waterLevel' | 'tide' | 'barometer'

/**
 * How far off a single value still says something, and between how distant neighbours a line is drawn, ms: tide tables come by the
 * hour, and over an hour the tide bends little.
 */
const reach: Record<Kind, { alone: number; between: number }> = {
  waterLevel: { alone: 30 * 60_000, between: 30 * 60_000 },
  tide: { alone: 30 * 60_000, between: 75 * 60_000 },
  barometer: { alone: 3 * 3_600_000, between: 3 * 3_600_000 },
}

interface Reading {
  takenAt: Date
  value: number
}

/** Neighbours before and after a time (ms since 1970 UTC), on a line between them; the nearer one alone; null for neither. */
async function valueAt({ sequelize }: Needs, stationId: number, kind: Kind, at: number): Promise<number | null> {
  const { alone, between } = reach[kind]
  const neighbour = (side: string) => `
    (SELECT takenAt, value FROM auxiliaryReadings
     WHERE stationId = :stationId AND kind = :kind AND qualityFlag IN (1, 2, 3) AND ${side} LIMIT 1)`
  const rows = await select<Reading>(
    sequelize,
    `${neighbour('takenAt BETWEEN :from AND :at ORDER BY takenAt DESC')}
     UNION ALL ${neighbour('takenAt > :at AND takenAt <= :to ORDER BY takenAt')}`,
    { stationId, kind, at: new Date(at), from: new Date(at - between), to: new Date(at + between) },
  )
  const [first, last] = rows.map(({ takenAt, value }) => ({ apart: new Date(takenAt).getTime() - at, value }))
  if (!first) return null
  if (last) return first.value + ((last.value - first.value) * -first.apart) / (last.apart - first.apart)
  return Math.abs(first.apart) <= alone ? first.value : null
}

/** A measured level goes before a tide table's. Metres above datum; null where neither is there. */
export const tideLevelAt = async (parts: Needs, stationId: number, at: number): Promise<number | null> =>
  (await valueAt(parts, stationId, 'waterLevel', at)) ?? valueAt(parts, stationId, 'tide', at)

/** Pascals. */
export const airPressureAt = (parts: Needs, stationId: number, at: number): Promise<number | null> =>
  valueAt(parts, stationId, 'barometer', at)

/** Days of a station's series, packed: what history reads. Derived from the operational run and rebuilt at will. */
import { DateTime } from 'luxon'
import { seriesPoint } from '../../../shared/schemas/station.ts'
import type { SeriesPoint } from '../../../shared/schemas/station.ts'
import type { Parts } from '../../config/parts.ts'
import { SeriesDay } from '../../models/index.ts'
import { packDay, unpackDay } from '../../models/seriesDayPayload.ts'
import type { DayValues } from '../../models/seriesDayPayload.ts'
import { execute, select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'
import { heightFlag, windowRows } from './points.ts'
import type { WindowRow } from './points.ts'

export const dayMs = 86_400_000

/** Quantities that points show. Directions have no extremes and a mean by vectors. */
const pointQuantities = [
  'significantWaveHeight',
  'height',
  'period',
  'towardDegrees',
  'speed',
  'directionalSpread',
] as const
/** Quantities that back-tests and studies read beside them. */
const furtherQuantities = [
  'significantWaveHeightSd',
  'peakPeriod',
  'meanPeriod',
  'energyPeriod',
  'energyFlux',
  'surgeHeight',
  'swellHeight',
  'swellPeriod',
  'swellTowardDegrees',
  'swellSpeed',
  'windSeaHeight',
  'windSeaPeriod',
  'windSeaTowardDegrees',
  'windSeaSpeed',
  'towardDegreesSd',
  'speedSd',
  'swellTowardDegreesSd',
  'swellSpeedSd',
  'windSeaTowardDegreesSd',
  'windSeaSpeedSd',
] as const
type PointQuantity = (typeof pointQuantities)[number]
type Quantity = PointQuantity | (typeof furtherQuantities)[number]
const names: Quantity[] = [...pointQuantities, ...furtherQuantities]
/** Of the vector: withheld where it was refused. */
const ofVector: Quantity[] = ['height', 'period', 'towardDegrees', 'towardDegreesSd', 'speed', 'speedSd', 'directionalSpread'] // prettier-ignore
const isDirection = (quantity: Quantity): boolean => /owardDegrees$/.test(quantity)

/** `YYYY-MM-DD` of the UTC day that a time lies in. */
export const dayOf = (time: number): string => DateTime.fromMillis(time, { zone: 'utc' }).toISODate() ?? ''
const startOf = (day: string): number => Date.parse(`${day}T00:00:00Z`)

/** A window belongs to the day in which it ends, midnight to the day that it begins. */
export async function rebuildSeriesDay(parts: Parts, stationId: number, day: string): Promise<void> {
  const start = startOf(day)
  const windows = await windowRows(parts, stationId, start - 1, start + dayMs - 1)
  const stepMs = spacingOf(windows)
  await inTransaction(parts.sequelize, async (transaction) => {
    const subject = { subjectKind: 'station', subjectId: stationId, day }
    await SeriesDay.destroy({ where: subject, transaction })
    if (windows.length === 0) return
    const rows = names.map((quantity) => ({
      ...subject,
      quantity,
      stepSeconds: stepMs / 1000,
      ...packedQuantity(windows, quantity, start, stepMs),
    }))
    await SeriesDay.bulkCreate(rows, { transaction })
  })
}

/** Days from `first` to `last`, both included. */
export async function rebuildSeriesDays(parts: Parts, stationId: number, first: string, last: string): Promise<void> {
  for (let start = startOf(first); start <= startOf(last); start += dayMs) {
    await rebuildSeriesDay(parts, stationId, dayOf(start))
  }
}

/** The smallest distance between neighbours: a gap does not change it. A day with one window has steps of a minute. */
function spacingOf(windows: WindowRow[]): number {
  const times = windows.map(({ windowEndsAt }) => windowEndsAt.getTime())
  const steps = times.slice(1).map((time, n) => time - times[n])
  return Math.min(...steps, 60_000 * (steps.length === 0 ? 1 : 60))
}

/** Flags are the estimate's, but beside the height's error they are the height's own. */
function packedQuantity(windows: WindowRow[], quantity: Quantity, start: number, stepMs: number) {
  const length = Math.ceil(dayMs / stepMs)
  const day: DayValues = { values: new Float32Array(length).fill(NaN), flags: new Uint8Array(length) }
  const good: number[] = []
  for (const row of windows) {
    const slot = Math.floor((row.windowEndsAt.getTime() - start) / stepMs)
    const value = ofVector.includes(quantity) && !row.resolved ? null : row[quantity]
    day.flags[slot] = quantity === 'significantWaveHeightSd' ? heightFlag(row) : row.qualityFlag
    if (value === null) continue
    day.values[slot] = value
    if (row.qualityFlag === 1 || row.qualityFlag === 3) good.push(value)
  }
  return { ...summary(good, quantity), goodCount: good.length, payload: packDay(day) }
}

function summary(good: number[], quantity: Quantity) {
  if (good.length === 0) return { minimum: null, maximum: null, mean: null }
  if (isDirection(quantity)) return { minimum: null, maximum: null, mean: meanBearing(good) }
  const mean = good.reduce((sum, value) => sum + value, 0) / good.length
  return { minimum: Math.min(...good), maximum: Math.max(...good), mean }
}

function meanBearing(degrees: number[]): number {
  const radians = degrees.map((value) => (value * Math.PI) / 180)
  const east = radians.reduce((sum, value) => sum + Math.sin(value), 0)
  const north = radians.reduce((sum, value) => sum + Math.cos(value), 0)
  return ((Math.atan2(east, north) * 180) / Math.PI + 360) % 360
}

interface StoredDay {
  day: string
  quantity: string
  stepSeconds: number
  payload: Buffer
}

/** Points of the packed days from `first` to `last`, by day; a day that was never packed is missing. */
export async function packedDays(
  { sequelize }: Parts,
  stationId: number,
  first: string,
  last: string,
): Promise<Map<string, SeriesPoint[]>> {
  const rows = await select<StoredDay>(
    sequelize,
    `SELECT DATE_FORMAT(day, '%Y-%m-%d') AS day, quantity, stepSeconds, payload FROM seriesDays
     WHERE subjectKind = 'station' AND subjectId = :stationId AND quantity IN (:quantities)
       AND day BETWEEN :first AND :last ORDER BY day`,
    { stationId, quantities: [...pointQuantities], first, last },
  )
  const days = new Map<string, StoredDay[]>()
  for (const row of rows) days.set(row.day, [...(days.get(row.day) ?? []), row])
  return new Map([...days].map(([day, stored]) => [day, pointsOfDay(day, stored)]))
}

function pointsOfDay(day: string, stored: StoredDay[]): SeriesPoint[] {
  const unpacked = new Map(stored.map(({ quantity, payload }) => [quantity, unpackDay(payload)]))
  const flags = unpacked.get('significantWaveHeight')?.flags ?? new Uint8Array()
  const stepMs = (stored[0]?.stepSeconds ?? 60) * 1000
  const at = (quantity: PointQuantity, slot: number): number | null => {
    const value = unpacked.get(quantity)?.values[slot] ?? NaN
    return Number.isNaN(value) ? null : value
  }
  return [...flags].flatMap((flag, slot) => {
    if (flag === 0) return []
    const toward = at('towardDegrees', slot)
    return {
      at: new Date(startOf(day) + slot * stepMs).toISOString(),
      qualityFlag: seriesPoint.shape.qualityFlag.parse(flag),
      resolved: toward !== null,
      toward,
      significantWaveHeight: at('significantWaveHeight', slot),
      height: at('height', slot),
      period: at('period', slot),
      speed: at('speed', slot),
      spread: at('directionalSpread', slot),
    }
  })
}

/** Days that were packed before some quantity was kept and whose estimates are still there, oldest first. */
export async function daysLacking({ sequelize }: Parts, stationId: number, most: number): Promise<string[]> {
  const rows = await select<{ day: string }>(
    sequelize,
    `SELECT DATE_FORMAT(p.day, '%Y-%m-%d') AS day FROM seriesDays p
     WHERE p.subjectKind = 'station' AND p.subjectId = :stationId GROUP BY p.day
     HAVING COUNT(*) < :wanted AND EXISTS (SELECT 1 FROM estimates e WHERE e.stationId = :stationId AND e.runId = 0
       AND e.windowEndsAt >= p.day AND e.windowEndsAt < p.day + INTERVAL 1 DAY)
     ORDER BY p.day LIMIT :most`,
    { stationId, wanted: names.length, most },
  )
  return rows.map(({ day }) => day)
}

const job = { job: 'seriesDays', subjectKind: 'station' }

/** The first day of a station that is not packed yet; null where it has no estimates. */
export async function firstUnpackedDay({ sequelize }: Parts, stationId: number): Promise<string | null> {
  const [row] = await select<{ day: string | null }>(
    sequelize,
    `SELECT DATE_FORMAT(COALESCE(
       (SELECT doneUpTo FROM watermarks WHERE job = :job AND subjectKind = :subjectKind AND subjectId = :stationId),
       (SELECT MIN(windowEndsAt) FROM estimates WHERE stationId = :stationId AND runId = 0)), '%Y-%m-%d') AS day`,
    { ...job, stationId },
  )
  return row?.day ?? null
}

/** Everything before this day is packed. */
export async function notePacked({ sequelize, clock }: Parts, stationId: number, nextDay: string): Promise<void> {
  await execute(
    sequelize,
    `INSERT INTO watermarks (job, subjectKind, subjectId, doneUpTo, epoch, updatedAt)
     VALUES (:job, :subjectKind, :stationId, :nextDay, 0, :now)
     ON DUPLICATE KEY UPDATE doneUpTo = VALUES(doneUpTo), updatedAt = VALUES(updatedAt)`,
    { ...job, stationId, nextDay: new Date(startOf(nextDay)), now: clock.now() },
  )
}

/** Points of a station's series out of its current estimates. */
import { flagOf } from '../../../shared/alerts/figures.ts'
import { currentEstimate, seriesPoint } from '../../../shared/schemas/station.ts'
import type { SeriesPoint } from '../../../shared/schemas/station.ts'
import type { Parts } from '../../config/parts.ts'
import { select } from '../../models/sql.ts'

export interface PointRow {
  windowEndsAt: Date
  resolved: number
  qualityFlag: number
  towardDegrees: number | null
  significantWaveHeight: number | null
  height: number | null
  period: number | null
  speed: number | null
  directionalSpread: number | null
}

/** What the packed days keep beside the points. */
export interface WindowRow extends PointRow {
  reason: string | null
  significantWaveHeightSd: number | null
  peakPeriod: number | null
  meanPeriod: number | null
  energyPeriod: number | null
  energyFlux: number | null
  surgeHeight: number | null
  swellHeight: number | null
  swellPeriod: number | null
  swellTowardDegrees: number | null
  swellSpeed: number | null
  windSeaHeight: number | null
  windSeaPeriod: number | null
  windSeaTowardDegrees: number | null
  windSeaSpeed: number | null
  towardDegreesSd: number | null
  speedSd: number | null
  swellTowardDegreesSd: number | null
  swellSpeedSd: number | null
  windSeaTowardDegreesSd: number | null
  windSeaSpeedSd: number | null
}

const ofPoints = [
  'windowEndsAt', 'resolved', 'qualityFlag', 'towardDegrees', 'significantWaveHeight', 'height', 'period', 'speed',
  'directionalSpread',
] // prettier-ignore
const ofWindows = [
  'reason', 'significantWaveHeightSd', 'peakPeriod', 'meanPeriod', 'energyPeriod', 'energyFlux', 'surgeHeight',
  'swellHeight', 'swellPeriod', 'swellTowardDegrees', 'swellSpeed', 'windSeaHeight', 'windSeaPeriod',
  'windSeaTowardDegrees', 'windSeaSpeed', 'towardDegreesSd', 'speedSd', 'swellTowardDegreesSd', 'swellSpeedSd',
  'windSeaTowardDegreesSd', 'windSeaSpeedSd',
] // prettier-ignore

/** Of the windows that end after `from` and not after `to`, rising in time; highest revisions of the operational run. */
export const pointRows = (parts: Parts, stationId: number, from: number, to: number): Promise<PointRow[]> =>
  rowsOf<PointRow>(parts, ofPoints, stationId, from, to)

/** The same with everything that is packed. */
export const windowRows = (parts: Parts, stationId: number, from: number, to: number): Promise<WindowRow[]> =>
  rowsOf<WindowRow>(parts, [...ofPoints, ...ofWindows], stationId, from, to)

const rowsOf = <Row extends PointRow>(
  { sequelize }: Parts,
  columns: string[],
  stationId: number,
  from: number,
  to: number,
): Promise<Row[]> =>
  select<Row>(
    sequelize,
    `SELECT ${columns.map((name) => `e.${name}`).join(', ')}
     FROM estimates e
     WHERE e.stationId = :stationId AND e.runId = 0 AND e.windowEndsAt > :from AND e.windowEndsAt <= :to
       AND NOT EXISTS (SELECT 1 FROM estimates newer WHERE newer.stationId = e.stationId
         AND newer.windowEndsAt = e.windowEndsAt AND newer.runId = 0 AND newer.revision > e.revision)
     ORDER BY e.windowEndsAt`,
    { stationId, from: new Date(from), to: new Date(to) },
  )

/** What is not resolved has a height at most. */
export function presentPoint(row: PointRow): SeriesPoint {
  const resolved = Boolean(row.resolved)
  const ofVector = (value: number | null): number | null => (resolved ? value : null)
  return {
    at: row.windowEndsAt.toISOString(),
    qualityFlag: seriesPoint.shape.qualityFlag.parse(row.qualityFlag),
    resolved,
    toward: ofVector(row.towardDegrees),
    significantWaveHeight: row.significantWaveHeight,
    height: ofVector(row.height),
    period: ofVector(row.period),
    speed: ofVector(row.speed),
    spread: ofVector(row.directionalSpread),
  }
}

/** The flag of the height, which a refused direction leaves standing. */
export const heightFlag = ({ resolved, reason, qualityFlag }: WindowRow): number =>
  flagOf(
    {
      resolved: Boolean(resolved),
      reason: currentEstimate.shape.reason.parse(reason),
      qualityFlag: seriesPoint.shape.qualityFlag.parse(qualityFlag),
    },
    false,
  )

/** The newest point of each step; a step without any has none, so that gaps show. */
export function newestOfEachStep(points: SeriesPoint[], stepMs: number): SeriesPoint[] {
  const bySteps = new Map<number, SeriesPoint>()
  for (const point of points) bySteps.set(Math.ceil(Date.parse(point.at) / stepMs), point)
  return [...bySteps.values()]
}

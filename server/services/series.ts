/** Series of a station: from its estimates for the last two days, from packed days before. */
import type { SeriesPoint, SeriesView } from '../../shared/schemas/station.ts'
import type { Parts } from '../config/parts.ts'
import { Station } from '../models/index.ts'
import { invalidInput, notFound } from './problems.ts'
import { dayMs, dayOf, packedDays } from './series/days.ts'
import { newestOfEachStep, pointRows, presentPoint } from './series/points.ts'

export { dayMs, dayOf, daysLacking, firstUnpackedDay, notePacked, rebuildSeriesDay, rebuildSeriesDays } from './series/days.ts'

export interface SeriesQuestion {
  hours: number
  stepSeconds: number
}

/** More are no drawing any more. */
const mostPoints = 5_000
/** Estimates themselves are read for so long back; late data has found its way into the days by then. */
const freshMs = 2 * dayMs

/** The last `hours` until now, one point a step at most. */
export async function readSeries(
  parts: Parts,
  stationId: number,
  { hours, stepSeconds }: SeriesQuestion,
): Promise<SeriesView> {
  if ((hours * 3600) / stepSeconds > mostPoints) {
    const message = `must give at most ${mostPoints} points over the hours asked for`
    throw invalidInput([{ path: 'query.stepSeconds', message }])
  }
  if (!(await Station.findByPk(stationId))) throw notFound('station', stationId)
  const to = parts.clock.now().getTime()
  const from = to - hours * 3_600_000
  const fresh = Math.max(from, Math.floor((to - freshMs) / dayMs) * dayMs - 1)
  const older = from < fresh ? await olderPoints(parts, stationId, from, fresh) : []
  const newer = (await pointRows(parts, stationId, fresh, to)).map(presentPoint)
  const points = newestOfEachStep([...older, ...newer], stepSeconds * 1000)
  return { stationId, from: new Date(from).toISOString(), to: new Date(to).toISOString(), stepSeconds, points }
}

/** Packed days, and estimates for those that are not packed. */
async function olderPoints(parts: Parts, stationId: number, from: number, to: number): Promise<SeriesPoint[]> {
  const packed = await packedDays(parts, stationId, dayOf(from), dayOf(to))
  const points: SeriesPoint[] = []
  for (let start = Math.floor(from / dayMs) * dayMs; start < to; start += dayMs) {
    const day = packed.get(dayOf(start))
    const rows = day ?? (await pointRows(parts, stationId, start - 1, start + dayMs - 1)).map(presentPoint)
    points.push(...rows)
  }
  return points.filter(({ at }) => Date.parse(at) > from && Date.parse(at) <= to)
}

/** The point of one window, as its row stands now; null where there is none. */
export async function readPoint(parts: Parts, stationId: number, windowEndsAt: number): Promise<SeriesPoint | null> {
  const [row] = await pointRows(parts, stationId, windowEndsAt - 1, windowEndsAt)
  return row ? presentPoint(row) : null
}

/** Which of two answers about a station is the newer one: REST answers and live events may overtake each other. */
import type { CurrentEstimate, SeriesPoint, StationView } from '../../shared/schemas/station.ts'

/** Later window, or the same window in a later (or equal) revision. */
export function isNewer(next: CurrentEstimate, held: CurrentEstimate | null): boolean {
  if (!held) return true
  const difference = Date.parse(next.windowEndsAt) - Date.parse(held.windowEndsAt)
  return difference > 0 || (difference === 0 && next.revision >= held.revision)
}

/** A vector that may be shown: resolved, and good or suspect. */
export const isTrusted = (estimate: CurrentEstimate): boolean =>
  estimate.resolved && (estimate.qualityFlag === 1 || estimate.qualityFlag === 3) && estimate.systems.length > 0

/** The station with this estimate in it, if it is newer than what is held. */
export function withEstimate(station: StationView, next: CurrentEstimate): StationView {
  const estimate = isNewer(next, station.estimate) ? next : station.estimate
  const lastGood = isTrusted(next) && isNewer(next, station.lastGood) ? next : station.lastGood
  return { ...station, estimate, lastGood }
}

/** A whole station as REST or the wire gives it, with the newer estimates of both. */
export function withNews(held: StationView | undefined, next: StationView): StationView {
  if (!held) return next
  const kept =
    held.estimate && !(next.estimate && isNewer(next.estimate, held.estimate)) ? held.estimate : next.estimate
  const good =
    held.lastGood && !(next.lastGood && isNewer(next.lastGood, held.lastGood)) ? held.lastGood : next.lastGood
  return { ...next, estimate: kept, lastGood: good }
}

/** The point that an estimate adds to ribbon and strips. */
export function pointOf(estimate: CurrentEstimate): SeriesPoint {
  const leading = estimate.resolved ? estimate.systems[0] : undefined
  return {
    at: estimate.windowEndsAt,
    qualityFlag: estimate.qualityFlag,
    resolved: estimate.resolved,
    toward: leading?.toward ?? null,
    significantWaveHeight: estimate.significantWaveHeight,
    height: leading?.significantWaveHeight ?? null,
    period: leading?.peakPeriod ?? null,
    speed: leading?.speed ?? null,
    spread: leading?.directionalSpread ?? null,
  }
}

export const seriesHours = 12

/** Steps of the ribbon: windows overlap by nineteen parts of twenty, so that more points would show nothing more. */
const seriesStepMs = 300_000

/** Points rising in time, one for each step and the newest of all, none older than the ribbon. */
export function withPoints(held: SeriesPoint[], arriving: SeriesPoint[]): SeriesPoint[] {
  const byTime = new Map<number, SeriesPoint>()
  for (const point of [...held, ...arriving]) byTime.set(Date.parse(point.at), point)
  const times = [...byTime.keys()].sort((a, b) => a - b)
  const newest = times.at(-1) ?? 0
  const oldest = newest - seriesHours * 3_600_000
  return times
    .filter((at) => at >= oldest && (at % seriesStepMs === 0 || at === newest))
    .flatMap((at) => byTime.get(at) ?? [])
}

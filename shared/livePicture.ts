/**
 * What may be drawn of a station at a given server time. Old figures leave the picture by the clock alone: nobody
 * has to tell the page that they are old.
 */
import type { CurrentEstimate, StationView } from './schemas/station.ts'

export type LivePicture =
  /** No estimate has ever been made. `share` of the window that is recorded, 0 to 1. */
  | { kind: 'loading'; share: number }
  /** Nothing was ever received. */
  | { kind: 'empty' }
  | { kind: 'stale'; ageSeconds: number; lastGood: CurrentEstimate | null }
  /** A test failed: the figures are withdrawn. */
  | { kind: 'failed'; estimate: CurrentEstimate; lastGood: CurrentEstimate | null }
  /** Sub-arrays disagree: no vector until a person has decided. */
  | { kind: 'frozen'; estimate: CurrentEstimate; lastGood: CurrentEstimate | null }
  /** No vector, with a reason. */
  | { kind: 'unresolved'; estimate: CurrentEstimate; lastGood: CurrentEstimate | null }
  | { kind: 'live'; estimate: CurrentEstimate; isSuspect: boolean }

type Seen = Pick<StationView, 'estimate' | 'lastGood' | 'staleAfterSeconds' | 'link'>

/** Seconds from the end of the window to `nowMs`. */
export const ageOf = (estimate: Pick<CurrentEstimate, 'windowEndsAt'>, nowMs: number): number =>
  (nowMs - Date.parse(estimate.windowEndsAt)) / 1000

/** `nowMs`: server time, ms since 1970. */
export function livePicture(station: Seen, nowMs: number): LivePicture {
  const { estimate, lastGood } = station
  if (estimate === null) {
    if (station.link.state === 'never') return { kind: 'empty' }
    return { kind: 'loading', share: station.link.recordShare }
  }
  const ageSeconds = ageOf(estimate, nowMs)
  if (ageSeconds > station.staleAfterSeconds) return { kind: 'stale', ageSeconds, lastGood }
  if (estimate.reason === 'geometry-doubtful') return { kind: 'frozen', estimate, lastGood }
  if (!estimate.resolved || estimate.systems.length === 0) return { kind: 'unresolved', estimate, lastGood }
  if (estimate.qualityFlag === 4 || estimate.qualityFlag === 9) return { kind: 'failed', estimate, lastGood }
  return { kind: 'live', estimate, isSuspect: estimate.qualityFlag === 3 }
}

/**
 * Delays: how long a condition has been true or clear. Differences of window ends, not counts of evaluations, for
 * neighbouring windows share nearly all their readings and prove nothing twice. Times are ms since 1970 UTC.
 */
import type { Condition } from '../schemas/limit.ts'
import type { Verdict } from './compare.ts'

export interface Track {
  /** Raised with its delay and not yet cleared with its own. */
  isActive: boolean
  activeSince: number | null
  /** The condition was first true, of what is active or about to be. */
  crossedAt: number | null
  /** The delay under way began here; null: none. */
  pendingSince: number | null
  /** Newest moment of which something was known. */
  lastKnownAt: number | null
}

export const atRest: Track = {
  isActive: false,
  activeSince: null,
  crossedAt: null,
  pendingSince: null,
  lastKnownAt: null,
}

/** A longer gap proves nothing about the time in it, so that a delay begins anew: half the usual window. */
export const longestBridgedGapMs = 600_000

/** A clock that was set back left times behind that are still to come: they tell nothing, and a delay begins anew. */
export function notAhead(track: Track, now: number): Track {
  const known = (time: number | null): number | null => (time !== null && time > now ? null : time)
  return {
    ...track,
    pendingSince: known(track.pendingSince),
    lastKnownAt: known(track.lastKnownAt),
    activeSince: track.activeSince === null ? null : Math.min(track.activeSince, now),
    crossedAt: track.crossedAt === null ? null : Math.min(track.crossedAt, now),
  }
}

type Delays = Pick<Condition, 'onDelaySeconds' | 'offDelaySeconds'>

/** The track after a moment. Unknown neither raises nor clears, and time in which nothing was known counts for no delay. */
export function follow(track: Track, verdict: Verdict, at: number, delays: Delays): Track {
  if (verdict === 'unknown') return track
  const wanted: Verdict = track.isActive ? 'clear' : 'raise'
  const isBridged = track.lastKnownAt !== null && at - track.lastKnownAt <= longestBridgedGapMs
  if (verdict !== wanted) {
    return { ...track, pendingSince: null, crossedAt: track.isActive ? track.crossedAt : null, lastKnownAt: at }
  }
  const pendingSince = track.pendingSince !== null && isBridged ? track.pendingSince : at
  const crossedAt = track.isActive ? track.crossedAt : pendingSince
  const delay = (track.isActive ? delays.offDelaySeconds : delays.onDelaySeconds) * 1000
  if (at - pendingSince < delay) return { ...track, pendingSince, crossedAt, lastKnownAt: at }
  if (track.isActive) return { ...atRest, lastKnownAt: at }
  return { isActive: true, activeSince: at, crossedAt, pendingSince: null, lastKnownAt: at }
}

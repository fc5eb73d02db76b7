/**
 * Which windows of a station are due, as pure arithmetic: times are milliseconds since 1970 UTC and windows are
 * named by their end, which lies on a multiple of the hop.
 */

/** Up to so many due windows are computed in their order; with more the newest comes first, the rest as late. */
export const longestOrderlyCatchUp = 30

/** A station's clock may be ahead of ours by so much before its frames are refused. */
const toleratedLead = 2_000

export interface WindowGrid {
  hopMs: number
  windowMs: number
  graceMs: number
}

export interface DueState {
  /** End of the newest window that has been dealt with. */
  doneUpTo: number
  /** End of the newest durable sample; null when the station has none. */
  durableUntil: number | null
  now: number
  /** A buffer of past readings is coming in: windows wait for their readings, not for the clock. */
  isBackfilling?: boolean
}

export interface DueWindows {
  /** Window ends to compute now, in this order. */
  live: number[]
  /** Ends from `first` to `last` (both included) to note as late and compute behind the live ones; null for none. */
  late: { first: number; last: number } | null
  /** Where the watermark stands when all of these are dealt with or noted. */
  newest: number
}

/** The last window end at or before a time. */
export const endAtOrBefore = (time: number, hopMs: number): number => Math.floor(time / hopMs) * hopMs

/** The first window end after a time. */
export const endAfter = (time: number, hopMs: number): number => endAtOrBefore(time, hopMs) + hopMs

/** Due when durable samples reach the end, at the latest when the grace has passed; never a window of the future. */
export function newestDueEnd(state: Omit<DueState, 'doneUpTo'>, grid: WindowGrid): number {
  const byTime = endAtOrBefore(state.now - grid.graceMs, grid.hopMs)
  if (state.durableUntil === null) return byTime
  const bySamples = endAtOrBefore(Math.min(state.durableUntil, state.now + toleratedLead), grid.hopMs)
  return state.isBackfilling ? bySamples : Math.max(byTime, bySamples)
}

export function dueWindows(state: DueState, grid: WindowGrid): DueWindows {
  const newest = Math.max(newestDueEnd(state, grid), state.doneUpTo)
  const first = endAfter(state.doneUpTo, grid.hopMs)
  const count = Math.max(0, (newest - first) / grid.hopMs + 1)
  if (count <= longestOrderlyCatchUp) {
    return { live: Array.from({ length: count }, (_, n) => first + n * grid.hopMs), late: null, newest }
  }
  return { live: [newest], late: { first, last: newest - grid.hopMs }, newest }
}

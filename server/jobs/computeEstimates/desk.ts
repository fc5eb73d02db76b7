/** What the job holds of each station between wakes, and which window of it comes next. */
import type { Track } from '../../../shared/waves/trackSystems.ts'
import type { Parts } from '../../config/parts.ts'
import * as estimates from '../../services/estimates.ts'
import type { Mark, StationTimeline, WindowGrid } from '../../services/estimates.ts'
import { durableUntil } from '../../services/readings.ts'
import type { Turn } from './turn.ts'

export interface Desk {
  timeline: StationTimeline
  mark: Mark
  /** Wave systems beside the newest window, and beside the late one computed last. */
  tracks: Track[]
  lateTracks: Track[]
  nextKey: number
  /** One window of a station at a time, so that the watermark and the systems' keys go in order. */
  isBusy: boolean
  /** Something failed: nothing more of it until the next wake. */
  isOut: boolean
  /** When readings were stored last, ms; null for not since the start. */
  storedAt: number | null
}

/** Readings older than `from` that came within the pause are a buffer being sent, and more are on their way. */
const backfillPauseMs = 5_000
const backfillFromMs = 60_000
/** The tracker looks this far back. */
const trackedMs = 30 * 60_000

export async function openDesk(parts: Parts, timeline: StationTimeline): Promise<Desk> {
  const mark = await estimates.takeOver(parts, timeline.id)
  const newest = await estimates.currentEstimateOf(parts, timeline.id)
  const end = newest ? new Date(newest.windowEndsAt) : new Date(0)
  const recent = await estimates.estimatesBetween(parts, timeline.id, new Date(end.getTime() - trackedMs), end)
  const keys = recent.flatMap(({ systems }) => systems.map(({ key }) => key))
  const tracks = (newest?.systems ?? []).map(({ key, peakPeriod, toward, name }) => ({
    name,
    contrarySince: null,
    key,
    peakPeriod,
    toward,
    at: end.getTime(),
  }))
  return {
    timeline,
    mark,
    tracks,
    lateTracks: tracks,
    nextKey: Math.max(0, ...keys) + 1,
    isBusy: false,
    isOut: false,
    storedAt: null,
  }
}

function gridAt({ timeline }: Desk, now: number): WindowGrid | null {
  const settings = estimates.inForce(timeline.settings, now)
  if (!settings) return null
  const { hopSeconds, windowSeconds, graceSeconds } = settings.content
  return { hopMs: hopSeconds * 1000, windowMs: windowSeconds * 1000, graceMs: graceSeconds * 1000 }
}

/** The next window in order, if one is due. Notes the windows of a long stop as late on the way. */
export async function liveTurn(parts: Parts, desk: Desk): Promise<Turn | null> {
  const now = parts.clock.now().getTime()
  const grid = gridAt(desk, now)
  if (!grid) return null
  const { mark, timeline } = desk
  if (mark.doneUpTo === null && !(await begin(parts, mark, grid))) return null
  const durable = durableUntil(timeline.id)
  const isFlowing = desk.storedAt !== null && now - desk.storedAt < backfillPauseMs
  const isBackfilling = isFlowing && durable !== null && now - durable > backfillFromMs
  const state = { doneUpTo: mark.doneUpTo ?? 0, durableUntil: durable, now, isBackfilling }
  const { live, late } = estimates.dueWindows(state, grid)
  const [windowEndsAt] = live
  if (windowEndsAt === undefined) return null
  if (late) {
    await estimates.noteLate(parts, mark, late, grid)
    mark.doneUpTo = late.last
  }
  const isOld = now - windowEndsAt > estimates.longestOrderlyCatchUp * grid.hopMs
  const known = { tracks: desk.tracks, nextKey: desk.nextKey }
  return { timeline, mark, windowEndsAt, isNext: true, origin: isOld ? 'late' : 'live', known }
}

/** A station's windows begin with its first reading. */
async function begin(parts: Parts, mark: Mark, { hopMs }: WindowGrid): Promise<boolean> {
  const first = await estimates.firstReadingAt(parts, mark.stationId)
  if (first === null) return false
  const doneUpTo = Math.floor(first / hopMs) * hopMs
  await estimates.beginMark(parts, mark, doneUpTo)
  mark.doneUpTo = doneUpTo
  return true
}

/** The newest window that was noted as late. */
export async function lateTurn(parts: Parts, desk: Desk): Promise<Turn | null> {
  const { timeline, mark } = desk
  const late = await estimates.newestLate(parts, mark, durableUntil(timeline.id))
  if (!late) return null
  const known = { tracks: desk.lateTracks, nextKey: desk.nextKey }
  return { timeline, mark, isNext: false, known, ...late }
}

/** What the desk keeps after a turn. */
export function noteTurn(desk: Desk, turn: Turn, known: Turn['known'] | null): void {
  if (turn.isNext) desk.mark.doneUpTo = Math.max(desk.mark.doneUpTo ?? 0, turn.windowEndsAt)
  if (known === null) return
  desk.nextKey = Math.max(desk.nextKey, known.nextKey)
  if (turn.isNext) desk.tracks = known.tracks
  // A past that is computed backwards goes on from the newest windows.
  if (!turn.isNext || desk.lateTracks.length === 0) desk.lateTracks = known.tracks
}

/**
 * What is known of each station's link at this moment, kept in memory and rebuilt from the stored readings at a
 * start: whether it is connected, its newest reading, its clock, and how much of the last twenty minutes is there.
 */
import type { LinkView } from '../../../shared/schemas/station.ts'
import { systemClock } from '../../config/clock.ts'
import type { Clock } from '../../config/clock.ts'

const binMs = 10_000
const recordMs = 20 * 60_000

interface StationLink {
  connected: boolean
  /** End of the newest durable sample, ms since 1970; null when there is none. */
  durableUntil: number | null
  /** Arrived less sent, s. */
  clockOffset: number | null
  /** Samples expected a second, over all sensors; 0 when not known. */
  expectedPerSecond: number
  /** Samples present by ten seconds: start of the ten seconds → count. */
  bins: Map<number, number>
}

let clock: Clock = systemClock
const links = new Map<number, StationLink>()

/** Forgets everything and takes its time from this clock: at a start, and between tests. */
export function beginLinks(with_: Clock): void {
  clock = with_
  links.clear()
}

function linkFor(stationId: number): StationLink {
  const known = links.get(stationId)
  if (known) return known
  const link = { connected: false, durableUntil: null, clockOffset: null, expectedPerSecond: 0, bins: new Map() }
  links.set(stationId, link)
  return link
}

/** The end of the newest durable sample of a station, ms since 1970 UTC; null when it has none. */
export const durableUntil = (stationId: number): number | null => links.get(stationId)?.durableUntil ?? null

export function linkOf(stationId: number): LinkView {
  const link = links.get(stationId)
  if (!link) return { state: 'never', lastReadingAt: null, clockOffsetSeconds: null, recordShare: 0 }
  return {
    state: link.connected ? 'connected' : link.durableUntil === null ? 'never' : 'silent',
    lastReadingAt: link.durableUntil === null ? null : new Date(link.durableUntil).toISOString(),
    // The view tells the station's clock less the server's, the protocol the opposite.
    clockOffsetSeconds: link.clockOffset === null ? null : 0 - link.clockOffset,
    recordShare: recordShareOf(link),
  }
}

export const linkOfAll = (): Map<number, LinkView> => new Map([...links.keys()].map((id) => [id, linkOf(id)]))

function recordShareOf({ bins, expectedPerSecond }: StationLink): number {
  if (expectedPerSecond === 0) return 0
  const now = clock.now().getTime()
  let present = 0
  for (const [start, count] of bins) if (start >= now - recordMs && start < now) present += count
  return Math.min(1, present / (expectedPerSecond * (recordMs / 1000)))
}

export function noteConnected(stationId: number, connected: boolean): void {
  linkFor(stationId).connected = connected
}

export function noteClockOffset(stationId: number, offsetSeconds: number): void {
  linkFor(stationId).clockOffset = offsetSeconds
}

export function noteExpected(stationId: number, samplesPerSecond: number): void {
  linkFor(stationId).expectedPerSecond = samplesPerSecond
}

/** Samples that became durable: `present` of them, spread evenly from `fromMs` up to `toMs`. */
export function noteDurable(stationId: number, fromMs: number, toMs: number, present: number): void {
  const link = linkFor(stationId)
  link.durableUntil = Math.max(link.durableUntil ?? -Infinity, toMs)
  const oldest = clock.now().getTime() - recordMs - binMs
  if (toMs <= oldest || toMs <= fromMs) return
  for (let bin = Math.floor(fromMs / binMs) * binMs; bin < toMs; bin += binMs) {
    const share = (Math.min(toMs, bin + binMs) - Math.max(fromMs, bin)) / (toMs - fromMs)
    link.bins.set(bin, (link.bins.get(bin) ?? 0) + present * share)
  }
  if (link.bins.size > 2 * (recordMs / binMs))
    for (const bin of link.bins.keys()) if (bin < oldest) link.bins.delete(bin)
}

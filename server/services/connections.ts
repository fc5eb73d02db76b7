/**
 * Who tried to connect and how far it came: kept in memory for the person who brings a station up for the first time. A
 * few attempts a station, and a few with keys that nobody has; a restart forgets them.
 */
import type { ConnectionAttempt } from '../../shared/schemas/stationSetUpLink.ts'
import type { Clock } from '../config/clock.ts'
import type { Bus } from './bus.ts'
import { troubleOf } from './connections/trouble.ts'

const keptEach = 20
const keptUnknown = 50
const rateOverMs = 60_000
const toldEveryMs = 1_000

type Hello = NonNullable<ConnectionAttempt['hello']>
type LastFrame = Pick<NonNullable<ConnectionAttempt['lastFrame']>, 'seq' | 'values'> & {
  /** ms since 1970 UTC */
  start: number
  arrivedAt: number
  /** Samples of one sensor, and the end of the last one. */
  samples: number
  end: number
}

interface ExaminedKey {
  state: ConnectionAttempt['keyState']
  prefix: string | null
  stationId: number | null
}

/** What the socket tells of one connection as it goes on. */
export interface Attempt {
  keyExamined(key: ExaminedKey): void
  heard(hello: Hello, differences: string[], stationCode: string | null): void
  welcomed(): void
  framed(frame: LastFrame): void
  refused(code: string, detail: string): void
  acknowledged(seq: number): void
  ended(code: number, reason: string): void
}

interface Kept {
  view: ConnectionAttempt
  /** Frames of the last minute: arrival, samples of one sensor, seconds from their end to their arrival. */
  recent: { arrivedAt: number; samples: number; latency: number }[]
  toldAt: number
}

const kept: Kept[] = []
let counted = 0

/** Forgets all of them: at a start, and between tests. */
export function forgetConnections(): void {
  kept.length = 0
  counted = 0
}

export function noteAttempt({ clock, bus }: { clock: Clock; bus: Bus }, remoteAddress: string): Attempt {
  const one: Kept = { view: newAttempt((counted += 1), remoteAddress, clock.now()), recent: [], toldAt: -Infinity }
  const { view } = one
  kept.push(one)

  function tell(): void {
    view.trouble = troubleOf(view)
    one.toldAt = clock.monotonic()
    bus.publish('connection.changed', structuredClone(view))
  }

  return {
    keyExamined({ state, prefix, stationId }) {
      Object.assign(view, { keyState: state, keyPrefix: prefix, stationId })
      if (state === 'valid') view.reached = 'keyAccepted'
      dropOld(stationId)
      tell()
    },
    heard(hello, differences, stationCode) {
      Object.assign(view, { hello, differences, stationCode })
      tell()
    },
    welcomed() {
      view.reached = 'welcomed'
      tell()
    },
    framed({ seq, values, start, arrivedAt, samples, end }) {
      view.reached = 'streaming'
      view.frames += 1
      view.lastFrame = { seq, values, start: iso(start), arrivedAt: iso(arrivedAt) }
      one.recent.push({ arrivedAt, samples, latency: (arrivedAt - end) / 1000 })
      while (one.recent[0] && one.recent[0].arrivedAt < arrivedAt - rateOverMs) one.recent.shift()
      if (clock.monotonic() - one.toldAt >= toldEveryMs) tell()
    },
    refused(code, detail) {
      const same = view.refusals.find((refusal) => refusal.code === code)
      if (same) Object.assign(same, { count: same.count + 1, detail })
      else view.refusals.push({ code, count: 1, detail })
      if (clock.monotonic() - one.toldAt >= toldEveryMs) tell()
    },
    acknowledged: (seq) => void (view.acknowledged = seq),
    ended(code, reason) {
      Object.assign(view, { endedAt: iso(clock.now().getTime()), closeCode: code, closeReason: reason })
      tell()
    },
  }
}

/** Newest first. */
export const attemptsOf = (stationId: number): ConnectionAttempt[] =>
  kept.flatMap(({ view }) => (view.stationId === stationId ? [view] : [])).reverse()

export const allAttempts = (): ConnectionAttempt[] => kept.map(({ view }) => view).reverse()

export interface LivingConnection {
  startedAt: string
  software: string | null
  /** Samples a second and sensor over the last minute; null before the second frame. */
  arrivingRate: number | null
  /** Median, s. */
  latencySeconds: number | null
}

/** The connection of a station that stands now; null where none does. */
export function livingConnection(stationId: number, now: number): LivingConnection | null {
  const one = kept.findLast(({ view }) => view.stationId === stationId && view.endedAt === null && view.hello !== null)
  if (!one) return null
  const recent = one.recent.filter(({ arrivedAt }) => arrivedAt > now - rateOverMs)
  const samples = recent.reduce((sum, frame) => sum + frame.samples, 0)
  const span = Math.min(rateOverMs, now - Date.parse(one.view.startedAt)) / 1000
  const latencies = recent.map(({ latency }) => latency).sort((a, b) => a - b)
  return {
    startedAt: one.view.startedAt,
    software: one.view.hello?.software ?? null,
    arrivingRate: span > 1 && recent.length > 0 ? samples / span : null,
    latencySeconds: latencies[Math.floor(latencies.length / 2)] ?? null,
  }
}

function dropOld(stationId: number | null): void {
  const same = kept.filter(({ view }) => view.stationId === stationId)
  const most = stationId === null ? keptUnknown : keptEach
  for (const old of same.slice(0, Math.max(0, same.length - most))) kept.splice(kept.indexOf(old), 1)
}

const iso = (timeMs: number): string => new Date(timeMs).toISOString()

const newAttempt = (id: number, remoteAddress: string, at: Date): ConnectionAttempt => ({
  id,
  stationId: null,
  stationCode: null,
  keyPrefix: null,
  keyState: 'missing',
  remoteAddress,
  startedAt: at.toISOString(),
  endedAt: null,
  reached: 'opened',
  closeCode: null,
  closeReason: null,
  trouble: null,
  hello: null,
  differences: [],
  frames: 0,
  acknowledged: 0,
  refusals: [],
  lastFrame: null,
})

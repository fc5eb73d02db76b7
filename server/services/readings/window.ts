/** Stored readings of a span of time, joined from hot frames and packed minutes. */
import type { Transaction } from 'sequelize'
import { firstSlotFrom, timeOfSlot } from '../../../shared/readings/slots.ts'
import { countPresent, emptySpan, fillFrom, lengthOf, seriesFromStored } from '../../../shared/readings/span.ts'
import type { SampleSpan } from '../../../shared/readings/span.ts'
import { select } from '../../models/sql.ts'
import { database } from './database.ts'
import { unpackReadings } from './payload.ts'

/** A frame holds at most a minute; its stored start is that of its first slot, rounded to a millisecond. */
const longestFrameMs = 61_000
const minuteMs = 60_000

export type ReadingSource = 'live' | 'late' | 'import' | 'demonstration'

export interface StoredPart {
  source: ReadingSource
  firstCommitId: number
  lastCommitId: number
  /** Arrived less sent, s; null for readings that did not come over the link. */
  clockOffset: number | null
  span: SampleSpan
}

export interface StoredWindow {
  /** Hz. */
  sampleRate: number
  /** Time of the first slot, ms since 1970 UTC. */
  startMs: number
  letters: string[]
  /** One series a sensor, all of one length, metres or decibars; NaN where a sample is missing. */
  series: Float64Array[]
  /** Samples that are there, over all sensors. */
  sampleCount: number
  /** Newest commit among the parts; null when there are none. */
  newestCommitId: number | null
  /** Where the parts came from, each once. */
  sources: ReadingSource[]
  /** Median over the parts of arrived less sent, s; null when none came over the link. */
  clockOffsetSeconds: number | null
  /** Readings at another rate that are not among these: their rate, Hz, and the end of the last, ms; null for none. */
  leftOut: { sampleRate: number; until: number } | null
}

interface PartRow {
  source: ReadingSource
  firstCommitId: number
  lastCommitId: number
  clockOffset: number | null
  payload: Buffer
}

/** One statement, and so one view: compaction moves frames into blocks under the reader's feet. */
const partsOfSpan = `
  SELECT source, firstCommitId, lastCommitId, clockOffset, payload FROM readingBlocks
  WHERE stationId = :stationId AND startsAt >= :minuteFrom AND startsAt < :to AND lastCommitId <= :upTo
  UNION ALL
  SELECT 'live', commitId, commitId, TIMESTAMPDIFF(MICROSECOND, sentAt, arrivedAt) / 1e6, payload FROM frames
  WHERE stationId = :stationId AND startsAt >= :frameFrom AND startsAt <= :to AND commitId <= :upTo`

/** Parts that may hold samples from `fromMs` up to `toMs`, of commits up to `upToCommitId`; oldest commit first. */
export async function loadParts(
  stationId: number,
  fromMs: number,
  toMs: number,
  upToCommitId = Number.MAX_SAFE_INTEGER,
  transaction?: Transaction,
): Promise<StoredPart[]> {
  const rows = await select<PartRow>(
    database(),
    partsOfSpan,
    {
      stationId,
      minuteFrom: new Date(Math.floor(fromMs / minuteMs) * minuteMs),
      frameFrom: new Date(fromMs - longestFrameMs),
      to: new Date(toMs),
      upTo: upToCommitId,
    },
    transaction,
  )
  return rows
    .map(({ payload, clockOffset, ...row }) => ({
      ...row,
      clockOffset: clockOffset === null ? null : Number(clockOffset),
      span: unpackReadings(payload),
    }))
    .sort((a, b) => a.firstCommitId - b.firstCommitId)
}

export interface GridWish {
  /** These sensors in this order, all missing where nothing is stored; absent: those that the parts name. */
  letters?: string[] | undefined
  /** Hz; absent: that of the newest part. */
  sampleRate?: number | undefined
}

/** The parts' samples on one grid. Parts of another rate cannot be joined and are left out. */
export function joinWindow(
  parts: readonly StoredPart[],
  fromMs: number,
  toMs: number,
  { letters, sampleRate = parts.at(-1)?.span.sampleRate ?? 1 }: GridWish = {},
): SampleSpan {
  const firstSlot = firstSlotFrom(fromMs, sampleRate)
  const length = Math.max(0, firstSlotFrom(toMs, sampleRate) - firstSlot)
  const joinable = parts.filter(({ span }) => span.sampleRate === sampleRate)
  const order = letters ?? [...new Set(joinable.flatMap(({ span }) => span.letters))]
  const window = emptySpan(sampleRate, firstSlot, order, length)
  for (const { span } of joinable) fillFrom(window, span)
  return window
}

/**
 * Readings from `fromMs` up to and without `toMs`. With `upToCommitId`: as they stood at that commit, for computing an
 * estimate again.
 */
export async function readWindow(
  stationId: number,
  fromMs: number,
  toMs: number,
  { upToCommitId, ...wish }: { upToCommitId?: number | undefined } & GridWish = {},
): Promise<StoredWindow> {
  const parts = await loadParts(stationId, fromMs, toMs, upToCommitId)
  const window = joinWindow(parts, fromMs, toMs, wish)
  return {
    sampleRate: window.sampleRate,
    startMs: timeOfSlot(window.firstSlot, window.sampleRate),
    letters: window.letters,
    series: window.series.map(seriesFromStored),
    sampleCount: countPresent(window),
    newestCommitId: parts.length === 0 ? null : Math.max(...parts.map(({ lastCommitId }) => lastCommitId)),
    sources: [...new Set(parts.map(({ source }) => source))],
    clockOffsetSeconds: medianOffset(parts),
    leftOut: leftOutOf(parts, window.sampleRate),
  }
}

function leftOutOf(parts: readonly StoredPart[], sampleRate: number): StoredWindow['leftOut'] {
  let last: StoredWindow['leftOut'] = null
  for (const { span } of parts) {
    if (span.sampleRate === sampleRate || countPresent(span) === 0) continue
    const until = timeOfSlot(span.firstSlot + lengthOf(span), span.sampleRate)
    if (!last || until > last.until) last = { sampleRate: span.sampleRate, until }
  }
  return last
}

function medianOffset(parts: readonly StoredPart[]): number | null {
  const offsets = parts.flatMap(({ clockOffset }) => (clockOffset === null ? [] : [clockOffset])).sort((a, b) => a - b)
  return offsets[Math.floor(offsets.length / 2)] ?? null
}

/**
 * Frames of about a second become one packed row a station and minute. Samples are moved, never altered, and parts
 * are cut where an estimate's view ended, so that it can be computed again from exactly what it saw.
 */
import type { Transaction } from 'sequelize'
import { firstSlotFrom, minuteOfSlot, timeOfSlot } from '../../../shared/readings/slots.ts'
import { lengthOf, sliceSpan } from '../../../shared/readings/span.ts'
import type { SampleSpan } from '../../../shared/readings/span.ts'
import { execute, select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'
import { insertBlocks, newestParts } from './blocks.ts'
import { blocksOfMinute } from './compactedMinute.ts'
import type { EstimateView, FramePiece } from './compactedMinute.ts'
import { database } from './database.ts'
import { groupBy } from './groupBy.ts'
import { packFrame, unpackReadings } from './payload.ts'
import { loadDeployments } from './station.ts'

const minuteMs = 60_000
/** So much of a station is moved in one transaction. */
const atOnceMs = 10 * minuteMs

export interface CompactionOptions {
  /** Frames of minutes that ended before this are moved, ms since 1970 UTC. */
  before: number
  /** Frames of later commits stay: a computation under way may have seen the one and not the other. */
  settledCommitId: number
}

/** Answers how many frames were moved. A station that fails does not keep the others: its fault is thrown at the end. */
export async function compactReadings({ before, settledCommitId }: CompactionOptions): Promise<number> {
  const until = Math.floor(before / minuteMs) * minuteMs
  const faults = new Map<number, unknown>()
  let moved = 0
  for (;;) {
    const stations = (await stationsWithFrames(until, settledCommitId)).filter(
      ({ stationId }) => !faults.has(stationId),
    )
    if (stations.length === 0) break
    for (const { stationId, startsAt } of stations) {
      const start = Math.floor(startsAt.getTime() / minuteMs) * minuteMs
      try {
        moved += await compactStation(stationId, start, Math.min(until, start + atOnceMs), settledCommitId)
      } catch (error) {
        faults.set(stationId, error)
      }
    }
  }
  if (faults.size > 0)
    throw new AggregateError(faults.values(), `frames of stations ${[...faults.keys()].join(', ')} stay`)
  return moved
}

const stationsWithFrames = (until: number, settledCommitId: number): Promise<{ stationId: number; startsAt: Date }[]> =>
  select(
    database(),
    `SELECT stationId, MIN(startsAt) AS startsAt FROM frames
     WHERE startsAt < :until AND commitId <= :settledCommitId GROUP BY stationId`,
    { until: new Date(until), settledCommitId },
  )

interface FrameRow {
  streamId: number
  seq: number
  commitId: number
  sentAt: Date
  arrivedAt: Date
  payload: Buffer
}

async function compactStation(stationId: number, from: number, to: number, settledCommitId: number): Promise<number> {
  const deployments = await loadDeployments(stationId)
  return inTransaction(database(), async (transaction) => {
    const frames = await select<FrameRow>(
      database(),
      `SELECT streamId, seq, commitId, sentAt, arrivedAt, payload FROM frames
       WHERE stationId = :stationId AND startsAt >= :from AND startsAt < :to AND commitId <= :settledCommitId
       ORDER BY commitId, streamId, seq FOR UPDATE`,
      { stationId, from: new Date(from), to: new Date(to), settledCommitId },
      transaction,
    )
    const pieces = frames.flatMap((frame) => piecesOf(frame, to))
    const views = await estimateViews(stationId, from, to, transaction)
    const parts = await newestParts(stationId, from, to, transaction)
    const blocks = [...groupBy(pieces, ({ minute }) => minute)].flatMap(([minute, ofMinute]) =>
      blocksOfMinute(ofMinute, { stationId, minute, views, newestPart: parts.get(minute) ?? -1, deployments }),
    )
    await insertBlocks(blocks, transaction)
    await removeFrames(frames, to, transaction)
    return frames.length
  })
}

/** A frame's samples by minute, those before `to`. */
function piecesOf(frame: FrameRow, to: number): FramePiece[] {
  const span = unpackReadings(frame.payload)
  const clockOffset = (frame.arrivedAt.getTime() - frame.sentAt.getTime()) / 1000
  const end = Math.min(span.firstSlot + lengthOf(span), firstSlotFrom(to, span.sampleRate))
  const pieces: FramePiece[] = []
  for (let slot = span.firstSlot; slot < end;) {
    const minute = minuteOfSlot(slot, span.sampleRate)
    const next = Math.min(end, firstSlotFrom(minute + minuteMs, span.sampleRate))
    pieces.push({ minute, commitId: Number(frame.commitId), clockOffset, span: sliceSpan(span, slot, next) })
    slot = next
  }
  return pieces
}

/** What estimates saw of these minutes: up to which commit, and whether they went on to the minute's end. */
async function estimateViews(
  stationId: number,
  from: number,
  to: number,
  transaction: Transaction,
): Promise<EstimateView[]> {
  const rows = await select<{ inputCommitId: number; startsAt: Date; endsAt: Date }>(
    database(),
    `SELECT inputCommitId, MIN(LEAST(windowStartsAt, COALESCE(surgeStartsAt, windowStartsAt))) AS startsAt,
       MAX(windowEndsAt) AS endsAt FROM estimates
     WHERE stationId = :stationId AND windowEndsAt > :from AND inputCommitId IS NOT NULL
       AND LEAST(windowStartsAt, COALESCE(surgeStartsAt, windowStartsAt)) < :to
     GROUP BY inputCommitId ORDER BY inputCommitId`,
    { stationId, from: new Date(from), to: new Date(to) },
    transaction,
  )
  return rows.map(({ inputCommitId, startsAt, endsAt }) => ({
    commitId: Number(inputCommitId),
    startsAt: startsAt.getTime(),
    endsAt: endsAt.getTime(),
  }))
}

/** Frames that reach beyond `to` keep what lies there; the others go. */
async function removeFrames(frames: readonly FrameRow[], to: number, transaction: Transaction): Promise<void> {
  const whole: number[][] = []
  for (const { streamId, seq, payload } of frames) {
    const rest = restAfter(unpackReadings(payload), to)
    if (rest === null) whole.push([streamId, seq])
    else await cutFrame(streamId, seq, rest, transaction)
  }
  for (let n = 0; n < whole.length; n += 2000) {
    await execute(
      database(),
      'DELETE FROM frames WHERE (streamId, seq) IN (:keys)',
      { keys: whole.slice(n, n + 2000) },
      transaction,
    )
  }
}

function restAfter(span: SampleSpan, to: number): SampleSpan | null {
  const rest = sliceSpan(span, firstSlotFrom(to, span.sampleRate), Infinity)
  return lengthOf(rest) === 0 ? null : rest
}

const cutFrame = (streamId: number, seq: number, rest: SampleSpan, transaction: Transaction): Promise<number> =>
  execute(
    database(),
    'UPDATE frames SET startsAt = :startsAt, sampleCount = :count, payload = :payload WHERE streamId = :streamId AND seq = :seq',
    {
      streamId,
      seq,
      startsAt: new Date(timeOfSlot(rest.firstSlot, rest.sampleRate)),
      count: lengthOf(rest),
      payload: packFrame(rest).payload,
    },
    transaction,
  )

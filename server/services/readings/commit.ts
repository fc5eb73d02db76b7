/**
 * One transaction for what many stations sent within a moment: frames, what was put aside, how far each stream has
 * come, the windows that late readings touch, and the counts of health. Nothing is acknowledged before it.
 */
import type { Transaction } from 'sequelize'
import { withHandled } from '../../../shared/readings/sequence.ts'
import type { SequenceLedger } from '../../../shared/readings/sequence.ts'
import { timeOfSlot } from '../../../shared/readings/slots.ts'
import { lengthOf } from '../../../shared/readings/span.ts'
import { execute } from '../../models/sql.ts'
import type { ArrivedFrame, Arrival, OpenStream, Outcome, RefusedFrame } from './arrival.ts'
import { database } from './database.ts'
import { loadReadUpTo, noteDirtyWindows } from './dirty.ts'
import type { Change } from './dirty.ts'
import { groupBy } from './groupBy.ts'
import { judgeFrames } from './judge.ts'
import type { Judgement } from './judge.ts'
import { timesOf } from './restore.ts'

export interface CommitContext {
  commitId: number
  now: number
  durableUntil(stationId: number): number | null
  /** Whether every frame of a station is to be compared with the store, for memory may be behind it. */
  mustCompare(stationId: number): boolean
  /** Whether another frame of a station may be kept aside now; counted either way. */
  mayKeepAside(stationId: number): boolean
  /** Runs within the transaction, last. */
  also(transaction: Transaction): Promise<void>
}

export interface StoredSpan extends Judgement {
  from: number
  to: number
  late: boolean
}

export interface Committed {
  outcomes: Map<Arrival, Outcome>
  /** Ledgers to put in force, for the commit has happened. */
  ledgers: Map<OpenStream, SequenceLedger>
  judged: StoredSpan[]
}

export async function commitArrivals(arrivals: readonly Arrival[], context: CommitContext): Promise<Committed> {
  return database().transaction(async (transaction) => {
    const judgements = await judgeAll(arrivals, context, transaction)
    const outcomes = new Map<Arrival, Outcome>(arrivals.map((arrival) => [arrival, { kind: 'putAside' }]))
    for (const { frame, outcome } of judgements) outcomes.set(frame, outcome)

    const judged = await noteLateness(judgements, context, transaction)
    await insertFrames(judged, context.commitId, transaction)
    await keepAside(arrivals, outcomes, context, transaction)
    const ledgers = ledgersAfter(arrivals)
    await saveLedgers(ledgers, transaction)
    await context.also(transaction)
    return { outcomes, ledgers, judged }
  })
}

async function judgeAll(
  arrivals: readonly Arrival[],
  { durableUntil, mustCompare }: CommitContext,
  transaction: Transaction,
): Promise<Judgement[]> {
  const frames = arrivals.filter((arrival) => arrival.kind === 'frame')
  const judgements: Judgement[] = []
  for (const [stationId, ofStation] of groupBy(frames, ({ station }) => station.id)) {
    const end = mustCompare(stationId) ? Infinity : durableUntil(stationId)
    judgements.push(...(await judgeFrames(ofStation, end, transaction)))
  }
  return judgements
}

/** Late is what touches a window that may have been read; those windows are noted. */
async function noteLateness(
  judgements: readonly Judgement[],
  { durableUntil, now }: CommitContext,
  transaction: Transaction,
): Promise<StoredSpan[]> {
  const stations = [...new Map(judgements.map(({ frame }) => [frame.station.id, frame.station])).values()]
  const readUpTo = await loadReadUpTo(stations, durableUntil, now, transaction)
  const judged = judgements.map((judgement) => {
    const { from, to } = timesOf(judgement.frame.span)
    return { ...judgement, from, to, late: from < (readUpTo.get(judgement.frame.station.id) ?? -Infinity) }
  })
  const changes = judged.filter(({ late, span }) => late && span !== null)
  const toChange = ({ frame, from, to }: StoredSpan): Change => ({ station: frame.station, from, to })
  await noteDirtyWindows(changes.map(toChange), readUpTo, 'late', now, transaction)
  return judged
}

async function insertFrames(judged: readonly StoredSpan[], commitId: number, transaction: Transaction): Promise<void> {
  const rows = judged.flatMap(({ frame, span, payload }) => (span ? [[
    frame.stream.id,
    frame.seq,
    frame.station.id,
    new Date(timeOfSlot(span.firstSlot, span.sampleRate)),
    span.sampleRate,
    lengthOf(span),
    new Date(frame.sentAt),
    new Date(frame.arrivedAt),
    commitId,
    frame.digest,
    payload,
  ]] : [])) // prettier-ignore
  if (rows.length === 0) return
  await execute(
    database(),
    `INSERT INTO frames (streamId, seq, stationId, startsAt, sampleRate, sampleCount, sentAt, arrivedAt, commitId,
       digest, payload) VALUES :rows`,
    { rows },
    transaction,
  )
}

async function keepAside(
  arrivals: readonly Arrival[],
  outcomes: ReadonlyMap<Arrival, Outcome>,
  { mayKeepAside }: CommitContext,
  transaction: Transaction,
): Promise<void> {
  const rows = arrivals
    .filter((arrival) => outcomes.get(arrival)?.kind === 'conflict' || arrival.kind === 'refused')
    .filter(({ station }) => mayKeepAside(station.id))
    .map((arrival) => [
      arrival.station.id,
      arrival.stream.id,
      arrival.seq,
      startOf(arrival),
      new Date(arrival.arrivedAt),
      arrival.kind === 'refused' ? arrival.reason : 'conflict',
      arrival.kind === 'refused' ? arrival.raw : arrival.payload,
    ])
  if (rows.length === 0) return
  await execute(
    database(),
    'INSERT INTO conflicts (stationId, streamId, seq, startsAt, arrivedAt, reason, payload) VALUES :rows',
    { rows },
    transaction,
  )
}

function startOf(arrival: ArrivedFrame | RefusedFrame): Date | null {
  if (arrival.kind === 'frame') return new Date(timesOf(arrival.span).from)
  return arrival.startsAt === null ? null : new Date(arrival.startsAt)
}

function ledgersAfter(arrivals: readonly Arrival[]): Map<OpenStream, SequenceLedger> {
  const ledgers = new Map<OpenStream, SequenceLedger>()
  for (const [stream, ofStream] of groupBy(arrivals, (arrival) => arrival.stream)) {
    ledgers.set(stream, withHandled(stream.ledger, ofStream.map(({ seq }) => seq))) // prettier-ignore
  }
  return ledgers
}

async function saveLedgers(ledgers: ReadonlyMap<OpenStream, SequenceLedger>, transaction: Transaction): Promise<void> {
  for (const [stream, { contiguous }] of ledgers) {
    if (contiguous === stream.ledger.contiguous) continue
    await execute(
      database(),
      'UPDATE streams SET durableSeq = GREATEST(durableSeq, :contiguous) WHERE id = :id',
      { id: stream.id, contiguous },
      transaction,
    )
  }
}

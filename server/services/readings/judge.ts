/**
 * What becomes of the frames that a station sent: stored, repeated, or in conflict with what is stored. Frames that
 * go on where the stored readings end, with a new number, need no look into the database.
 */
import type { Transaction } from 'sequelize'
import { compareWithStored } from '../../../shared/readings/compare.ts'
import { isHandled } from '../../../shared/readings/sequence.ts'
import { countPresent, fillFrom } from '../../../shared/readings/span.ts'
import type { SampleSpan } from '../../../shared/readings/span.ts'
import { select } from '../../models/sql.ts'
import type { ArrivedFrame, Outcome } from './arrival.ts'
import { database } from './database.ts'
import { packFrame } from './payload.ts'
import { timesOf } from './restore.ts'
import { joinWindow, loadParts } from './window.ts'

export interface Judgement {
  frame: ArrivedFrame
  outcome: Outcome
  /** What is to be stored of it; null for nothing. */
  span: SampleSpan | null
  payload: Buffer
}

/** Frames less than this apart are compared with one reading of the store. */
const clusterGapMs = 60_000

/** Frames of one station in the order of arrival; `durableUntil` is the end of its stored readings, Infinity for unknown. */
export async function judgeFrames(
  frames: readonly ArrivedFrame[],
  durableUntil: number | null,
  transaction: Transaction,
): Promise<Judgement[]> {
  const fresh = new Set(framesThatGoOn(frames, durableUntil))
  const others = frames.filter((frame) => !fresh.has(frame))
  const [stored, digests] = [await storedBeside(others, transaction), await storedDigests(others, transaction)]
  const numbered = new Map<string, Buffer>()
  const judgements = frames.map((frame) => {
    const key = keyOf(frame)
    const known = numbered.get(key) ?? digests.get(key) ?? null
    const judgement = fresh.has(frame) && known === null ? storeWhole(frame) : judge(frame, stored, known)
    if (judgement.outcome.kind === 'stored') numbered.set(key, frame.digest)
    if (judgement.span) for (const window of stored) fillFrom(window, judgement.span)
    return judgement
  })
  return judgements
}

/** New numbers whose samples all lie behind everything stored and everything that came before them here. */
function framesThatGoOn(frames: readonly ArrivedFrame[], durableUntil: number | null): ArrivedFrame[] {
  let end = durableUntil ?? -Infinity
  return frames.filter((frame) => {
    const { from, to } = timesOf(frame.span)
    const goesOn = from >= end - 1 && !isHandled(frame.stream.ledger, frame.seq)
    end = Math.max(end, to)
    return goesOn
  })
}

const storeWhole = (frame: ArrivedFrame): Judgement => ({
  frame,
  outcome: { kind: 'stored' },
  span: frame.span,
  payload: frame.payload,
})

function judge(frame: ArrivedFrame, stored: readonly SampleSpan[], known: Buffer | null): Judgement {
  const nothing = (outcome: Outcome): Judgement => ({ frame, outcome, span: null, payload: frame.payload })
  if (known?.equals(frame.digest)) return nothing({ kind: 'repeated' })
  if (known) return nothing({ kind: 'conflict', detail: 'another frame is stored under this number' })
  const window = stored.find((candidate) => covers(candidate, frame.span))
  if (!window) return storeWhole(frame)
  const { added, conflicting, remainder } = compareWithStored(frame.span, window)
  if (conflicting > 0) {
    return nothing({ kind: 'conflict', detail: `${conflicting} stored samples have other values at these times` })
  }
  if (isHandled(frame.stream.ledger, frame.seq)) {
    if (added === 0) return nothing({ kind: 'repeated' })
    return nothing({ kind: 'conflict', detail: 'this number was handled, and its samples are not the stored ones' })
  }
  if (added === 0 && countPresent(frame.span) > 0) return nothing({ kind: 'repeated' })
  return { frame, outcome: { kind: 'stored' }, span: remainder, payload: packFrame(remainder).payload }
}

const covers = (window: SampleSpan, span: SampleSpan): boolean => {
  const [outer, inner] = [timesOf(window), timesOf(span)]
  return window.sampleRate === span.sampleRate && outer.from <= inner.from && inner.to <= outer.to
}

/** What is stored around these frames, one span for each run of them. */
async function storedBeside(frames: readonly ArrivedFrame[], transaction: Transaction): Promise<SampleSpan[]> {
  const runs: { from: number; to: number }[] = []
  for (const { from, to } of frames.map(({ span }) => timesOf(span)).sort((a, b) => a.from - b.from)) {
    const last = runs.at(-1)
    if (last && from - last.to < clusterGapMs) last.to = Math.max(last.to, to)
    else runs.push({ from, to })
  }
  const station = frames[0]?.station
  if (!station) return []
  const letters = [...new Set(frames.flatMap(({ span }) => span.letters))]
  const stored: SampleSpan[] = []
  for (const { from, to } of runs) {
    const parts = await loadParts(station.id, from, to, undefined, transaction)
    stored.push(joinWindow(parts, from, to, { letters, sampleRate: station.sampleRate }))
  }
  return stored
}

/** Digests of the frames that are still hot under the same numbers. */
async function storedDigests(frames: readonly ArrivedFrame[], transaction: Transaction): Promise<Map<string, Buffer>> {
  if (frames.length === 0) return new Map()
  const rows = await select<{ streamId: number; seq: number; digest: Buffer }>(
    database(),
    'SELECT streamId, seq, digest FROM frames WHERE (streamId, seq) IN (:keys)',
    { keys: frames.map(({ stream, seq }) => [stream.id, seq]) },
    transaction,
  )
  return new Map(rows.map(({ streamId, seq, digest }) => [`${streamId}/${seq}`, digest]))
}

const keyOf = ({ stream, seq }: ArrivedFrame): string => `${stream.id}/${seq}`

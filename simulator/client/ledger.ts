/**
 * A station's memory of its sequence: which frame belongs to which second. Readings are a pure function of time, so
 * the ledger is all the buffer there is: a frame that must be sent again is made again. It is written before a frame
 * goes out, some frames ahead, so that after a kill no number can come to mean another second.
 */
import { randomUUID } from 'node:crypto'
import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs'
import { dirname } from 'node:path'
import { z } from 'zod'
import { frameMilliseconds } from './frameSource.ts'

const ledgerContent = z.object({
  stream: z.uuid(),
  /** From `seq` on, frame n begins at start + (n − seq) seconds. Rising. */
  segments: z.array(z.object({ seq: z.number().int().min(1), start: z.number().int() })).min(1),
  /** Frames up to here may have been sent. */
  reservedUpTo: z.number().int().min(0),
  acknowledged: z.number().int().min(0),
})
type LedgerContent = z.infer<typeof ledgerContent>

const reservedAtOnce = 30
/** What a logger keeps through its own short stop. */
const keptThroughRestart = 120_000
/** A frame older than this would be refused; the stream is begun anew. */
export const longestBuffer = 24 * 3_600_000 - 60_000

export interface Ledger {
  stream(): string
  startOf(seq: number): number
  acknowledged(): number
  /** Before a frame goes out. */
  reserve(seq: number): void
  acknowledge(seq: number): void
  /** Whether the frame can still be made and would still be taken. */
  canSend(seq: number, now: number): boolean
  /** A new stream that begins with the oldest frame worth sending. */
  renew(now: number): void
  save(): void
}

/** `file` null: nothing outlives the process. `startAt`: where a stream without a past begins. */
export function openLedger(file: string | null, startAt: number, now: number): Ledger {
  const stored = file === null ? null : readLedger(file)
  let content = stored ? resume(stored, Math.min(startAt, now - keptThroughRestart)) : begin(startAt)

  function save(): void {
    if (file === null) return
    mkdirSync(dirname(file), { recursive: true })
    writeFileSync(`${file}.new`, JSON.stringify(content))
    renameSync(`${file}.new`, file)
  }

  function startOf(seq: number): number {
    for (let index = content.segments.length - 1; index >= 0; index--) {
      const segment = content.segments[index]
      if (segment.seq <= seq) return segment.start + (seq - segment.seq) * frameMilliseconds
    }
    throw new RangeError(`frame ${seq} lies before the ledger`)
  }

  save()
  return {
    stream: () => content.stream,
    startOf,
    acknowledged: () => content.acknowledged,
    reserve(seq) {
      if (seq <= content.reservedUpTo) return
      content.reservedUpTo = seq + reservedAtOnce - 1
      save()
    },
    acknowledge(seq) {
      content.acknowledged = seq
      while (content.segments.length > 1 && content.segments[1].seq <= seq + 1) content.segments.shift()
    },
    canSend: (seq, time) =>
      seq >= content.segments[0].seq && seq <= content.reservedUpTo + 1 && startOf(seq) >= time - longestBuffer,
    renew(time) {
      const oldest = Math.max(content.segments[0].seq, content.acknowledged + 1)
      content = begin(Math.max(startOf(oldest), time - longestBuffer + 60_000))
      save()
    },
    save,
  }
}

const begin = (startAt: number): LedgerContent => ({
  stream: randomUUID(),
  segments: [{ seq: 1, start: Math.ceil(startAt / frameMilliseconds) * frameMilliseconds }],
  reservedUpTo: 0,
  acknowledged: 0,
})

/** Goes on where the ledger ends, or leaves a gap when that lies longer ago than `wantedStart`. */
function resume(content: LedgerContent, wantedStart: number): LedgerContent {
  const last = content.segments[content.segments.length - 1]
  const next = last.start + (content.reservedUpTo + 1 - last.seq) * frameMilliseconds
  if (next >= wantedStart) return content
  const start = Math.ceil(wantedStart / frameMilliseconds) * frameMilliseconds
  return { ...content, segments: [...content.segments, { seq: content.reservedUpTo + 1, start }] }
}

/** Null when there is none or it cannot be read: a station that lost its counter begins a new stream. */
function readLedger(file: string): LedgerContent | null {
  try {
    return ledgerContent.parse(JSON.parse(readFileSync(file, 'utf8')))
  } catch {
    return null
  }
}

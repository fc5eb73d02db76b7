/** Rows of a file into packed minutes on the station's grid. Everything that is wrong with the file is collected. */
import { createHash } from 'node:crypto'
import { setImmediate } from 'node:timers/promises'
import { firstSlotFrom, minuteOfSlot, nearestSlot, nextMinuteSlot } from '../../../shared/readings/slots.ts'
import { emptySpan, lengthOf, sliceSpan, toStored } from '../../../shared/readings/span.ts'
import type { SampleSpan } from '../../../shared/readings/span.ts'
import { packBlock } from './payload.ts'
import type { PackedReadings } from './payload.ts'

export interface ImportRow {
  /** ms since 1970 UTC. */
  timeMs: number
  /** One a letter, metres or decibars; null and NaN are missing. */
  values: readonly (number | null)[]
  /** Of the file, counted from 1; absent: the rows are counted. */
  line?: number
}

export interface ImportFault {
  /** Counted from 1; null where it concerns the whole. */
  row: number | null
  reason: string
}

export interface ImportedMinute extends PackedReadings {
  /** ms since 1970 UTC. */
  startsAt: number
  length: number
  present: number
}

export interface Imported {
  minutes: ImportedMinute[]
  rows: number
  faults: ImportFault[]
  /** SHA-256 over the digests of the minutes. */
  contentHash: Buffer
}

export interface ImportShape {
  sampleRate: number
  letters: string[]
  /** What is wrong with readings at this time; null for nothing. Asked once a minute. */
  faultAt(minuteMs: number): string | null
}

const mostFaults = 100
const [least, most] = [-1000, 100_000]
/** Other work gets its turn after so many minutes were packed. */
const minutesATurn = 30

export async function packImport(
  rows: AsyncIterable<ImportRow> | Iterable<ImportRow>,
  { sampleRate, letters, faultAt }: ImportShape,
): Promise<Imported> {
  const minutes: ImportedMinute[] = []
  const faults: ImportFault[] = []
  const hash = createHash('sha256')
  let open: { span: SampleSpan; next: number; last: number; present: number } | null = null
  let count = 0
  let at = 0
  let single = 0
  let before = -Infinity

  function close(): void {
    if (!open) return
    const span = sliceSpan(open.span, open.span.firstSlot, open.last + 1)
    const packed = packBlock(span)
    hash.update(packed.digest)
    const startsAt = minuteOfSlot(span.firstSlot, sampleRate)
    minutes.push({ ...packed, startsAt, length: lengthOf(span), present: open.present })
    open = null
  }

  function begin(slot: number): NonNullable<typeof open> {
    const startsAt = minuteOfSlot(slot, sampleRate)
    const reason = faultAt(startsAt)
    if (reason !== null) note(reason)
    const next = nextMinuteSlot(slot, sampleRate)
    const first = firstSlotFrom(startsAt, sampleRate)
    return { span: emptySpan(sampleRate, first, letters, next - first), next, last: slot, present: 0 }
  }

  function note(reason: string, row: number | null = at): void {
    if (faults.length < mostFaults) faults.push({ row, reason })
  }

  for await (const { timeMs, values, line } of rows) {
    count += 1
    at = line ?? count
    const slot = nearestSlot(timeMs, sampleRate)
    const wrong = rowFault(slot, before, values, letters)
    if (wrong !== null) {
      note(wrong)
      continue
    }
    if (slot === before + 1) single += 1
    before = slot
    if (open && slot >= open.next) {
      close()
      if (minutes.length % minutesATurn === 0) await setImmediate()
    }
    open ??= begin(slot)
    open.last = slot
    for (let index = 0; index < letters.length; index++) {
      const stored = toStored(values[index] ?? null)
      const series = open.span.series[index]
      if (series) series[slot - open.span.firstSlot] = stored
      if (stored === stored) open.present += 1
    }
  }
  close()
  if (count === 0) note('there are no rows', null)
  else if (single < (count - 1) / 2) note(`most rows do not follow each other at ${sampleRate} Hz, the rate of the station`, null) // prettier-ignore
  return { minutes, rows: count, faults, contentHash: hash.digest() }
}

function rowFault(slot: number, before: number, values: ImportRow['values'], letters: string[]): string | null {
  if (!Number.isSafeInteger(slot) || slot < 0) return 'the time cannot be read'
  if (slot === before) return 'two rows lie in one sampling interval'
  if (slot < before) return 'the time is before that of the row above'
  if (values.length !== letters.length) return `there are ${values.length} values for ${letters.length} sensors`
  for (const value of values) {
    if (value === null || Number.isNaN(value)) continue
    if (!(value >= least && value <= most)) return 'a value is out of range'
  }
  return null
}

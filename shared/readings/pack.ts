/**
 * Readings as bytes, and back: the payload of frames and blocks before they are deflated.
 *
 * Layout: version (1), sample rate (float64), first slot, number of samples, number of sensors, their letters, then
 * one byte that says whether samples are missing and, if so, a bit mask of them (sensor after sensor, lowest bit
 * first), then for each sensor its samples as differences to the one before (the first to zero), zigzag, varint.
 * Whole numbers throughout, so packing and unpacking change nothing.
 */
import { ByteReader, ByteWriter } from './bytes.ts'
import { lengthOf } from './span.ts'
import type { SampleSpan } from './span.ts'

const version = 1
/** An hour at the highest rate: more than any block holds, so a spoilt length cannot ask for all the memory. */
const mostSamples = 64 * 3600
const mostSensors = 64

export function packSamples(span: SampleSpan): Uint8Array {
  const writer = new ByteWriter()
  writer.byte(version)
  writer.float64(span.sampleRate)
  writer.unsigned(span.firstSlot)
  writer.unsigned(lengthOf(span))
  writer.unsigned(span.letters.length)
  for (const letter of span.letters) writer.text(letter)
  packMissing(writer, span.series)
  for (const series of span.series) packDifferences(writer, series)
  return writer.finish()
}

/** Throws RangeError when the bytes are no packed readings. */
export function unpackSamples(bytes: Uint8Array): SampleSpan {
  const reader = new ByteReader(bytes)
  if (reader.byte() !== version) throw new RangeError('packed readings of another version')
  const sampleRate = reader.float64()
  const firstSlot = reader.unsigned()
  const length = reader.unsigned()
  const sensors = reader.unsigned()
  if (length > mostSamples || sensors > mostSensors) throw new RangeError('packed readings claim an impossible size')
  const letters = Array.from({ length: sensors }, () => reader.text())
  const series = letters.map(() => new Float64Array(length))
  unpackMissing(reader, series)
  for (const values of series) reader.running(values)
  if (!reader.atEnd) throw new RangeError('packed readings are followed by something else')
  return { sampleRate, firstSlot, letters, series }
}

function packMissing(writer: ByteWriter, series: readonly Float64Array[]): void {
  if (!series.some((values) => values.some(Number.isNaN))) return writer.byte(0)
  writer.byte(1)
  let mask = 0
  let bit = 0
  for (const values of series) {
    for (const value of values) {
      if (Number.isNaN(value)) mask |= 1 << bit
      if (++bit === 8) {
        writer.byte(mask)
        mask = bit = 0
      }
    }
  }
  if (bit > 0) writer.byte(mask)
}

/** Marks missing samples by NaN; the others stay as they are. */
function unpackMissing(reader: ByteReader, series: readonly Float64Array[]): void {
  if (reader.byte() === 0) return
  let mask = 0
  let bit = 8
  for (const values of series) {
    for (let n = 0; n < values.length; n++) {
      if (bit === 8) {
        mask = reader.byte()
        bit = 0
      }
      if ((mask >> bit++) & 1) values[n] = NaN
    }
  }
}

function packDifferences(writer: ByteWriter, values: Float64Array): void {
  let before = 0
  for (const value of values) {
    if (Number.isNaN(value)) continue
    writer.signed(value - before)
    before = value
  }
}

/**
 * Packed readings as they stand in the database. A frame lives a quarter of an hour and is stored as it is packed; a
 * minute is deflated in zlib's format, whose first byte (0x78) tells the two apart and whose checksum guards it.
 */
import { createHash } from 'node:crypto'
import { deflateSync, inflateSync } from 'node:zlib'
import { packSamples, unpackSamples } from '../../../shared/readings/pack.ts'
import type { SampleSpan } from '../../../shared/readings/span.ts'

const zlibHeader = 0x78
/** On waves with an instrument's noise the level makes no difference; what stands still or is missing shrinks at any. */
const deflateLevel = 6

export interface PackedReadings {
  payload: Buffer
  /** SHA-256 of the packed readings before they are deflated: equal readings, equal digest. */
  digest: Buffer
}

export function packFrame(span: SampleSpan): PackedReadings {
  const packed = packSamples(span)
  return { payload: Buffer.from(packed.buffer, 0, packed.length), digest: digestOf(packed) }
}

export function packBlock(span: SampleSpan): PackedReadings {
  const packed = packSamples(span)
  return { payload: deflateSync(packed, { level: deflateLevel }), digest: digestOf(packed) }
}

export const unpackReadings = (payload: Buffer): SampleSpan =>
  unpackSamples(payload[0] === zlibHeader ? inflateSync(payload) : payload)

const digestOf = (packed: Uint8Array): Buffer => createHash('sha256').update(packed).digest()

/** A day of one quantity as it is packed: Float32 values, then one flag a value, deflated. */
import { deflateRawSync, inflateRawSync } from 'node:zlib'

export interface DayValues {
  /** NaN where there is none. */
  values: Float32Array
  /** QARTOD flags; 0 where there was no window. */
  flags: Uint8Array
}

export function packDay({ values, flags }: DayValues): Buffer {
  const bytes = Buffer.alloc(values.length * 5)
  values.forEach((value, n) => bytes.writeFloatLE(value, n * 4))
  bytes.set(flags, values.length * 4)
  return deflateRawSync(bytes)
}

/** Most machines keep numbers as they are packed, lowest byte first: then a copy of the bytes is the values. */
const isPackedAsKept = new Uint8Array(Uint16Array.of(1).buffer)[0] === 1

export function unpackDay(payload: Buffer): DayValues {
  const bytes = inflateRawSync(payload)
  const length = bytes.length / 5
  const values = new Float32Array(length)
  if (isPackedAsKept) new Uint8Array(values.buffer).set(bytes.subarray(0, length * 4))
  else for (let n = 0; n < length; n += 1) values[n] = bytes.readFloatLE(n * 4)
  return { values, flags: Uint8Array.from(bytes.subarray(length * 4)) }
}

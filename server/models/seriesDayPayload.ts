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

export function unpackDay(payload: Buffer): DayValues {
  const bytes = inflateRawSync(payload)
  const length = bytes.length / 5
  return {
    values: Float32Array.from({ length }, (_, n) => bytes.readFloatLE(n * 4)),
    flags: Uint8Array.from(bytes.subarray(length * 4)),
  }
}

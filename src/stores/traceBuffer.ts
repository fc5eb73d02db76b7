/** The newest readings of an array, kept for the record section. */
import type { TracesChunk } from '../../shared/schemas/station.ts'

export interface TraceBuffer {
  startsAtMs: number
  /** Seconds between samples. */
  interval: number
  sensors: string[]
  /** values[i][n] of sensor i; null = missing. Raw units: m or dbar. */
  values: (number | null)[][]
}

export const bufferSeconds = 90

/** Takes a chunk in, wherever it lies; what is between chunks stays missing, what is older than the buffer falls out. */
export function appendTraces(buffer: TraceBuffer | null, chunk: TracesChunk, seconds = bufferSeconds): TraceBuffer {
  const arriving: TraceBuffer = {
    startsAtMs: Date.parse(chunk.startsAt),
    interval: chunk.interval,
    sensors: chunk.sensors,
    values: chunk.values,
  }
  const longest = Math.round(seconds / chunk.interval)
  if (!buffer || !alike(buffer, arriving)) return cut(arriving, longest)
  const startsAtMs = Math.min(buffer.startsAtMs, arriving.startsAtMs)
  const endsAtMs = Math.max(endOf(buffer), endOf(arriving))
  const firstKept = Math.max(startsAtMs, endsAtMs - longest * chunk.interval * 1000)
  const length = Math.round((endsAtMs - firstKept) / 1000 / chunk.interval)
  const values = chunk.sensors.map((_, i) => {
    const row = new Array<number | null>(length).fill(null)
    lay(row, buffer, i, firstKept)
    lay(row, arriving, i, firstKept)
    return row
  })
  return { startsAtMs: firstKept, interval: chunk.interval, sensors: chunk.sensors, values }
}

const lengthOf = (buffer: TraceBuffer): number => Math.max(0, ...buffer.values.map((row) => row.length))
const endOf = (buffer: TraceBuffer): number => buffer.startsAtMs + lengthOf(buffer) * buffer.interval * 1000

function alike(a: TraceBuffer, b: TraceBuffer): boolean {
  return (
    a.interval === b.interval && a.sensors.length === b.sensors.length && a.sensors.every((s, i) => s === b.sensors[i])
  )
}

function lay(row: (number | null)[], from: TraceBuffer, sensor: number, firstMs: number): void {
  const offset = Math.round((from.startsAtMs - firstMs) / 1000 / from.interval)
  from.values[sensor]?.forEach((value, n) => {
    const at = offset + n
    if (at >= 0 && at < row.length && value !== null) row[at] = value
  })
}

function cut(buffer: TraceBuffer, longest: number): TraceBuffer {
  const surplus = lengthOf(buffer) - longest
  if (surplus <= 0) return buffer
  return {
    ...buffer,
    startsAtMs: buffer.startsAtMs + surplus * buffer.interval * 1000,
    values: buffer.values.map((row) => row.slice(surplus)),
  }
}

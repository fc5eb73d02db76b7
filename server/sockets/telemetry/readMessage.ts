/** What a station sent, told apart into what can be used and what cannot. Throws nothing, whatever comes. */
import type { z } from 'zod'
import { stationMessage } from '../../../shared/wire/telemetry.ts'
import type { FrameMessage, HelloMessage } from '../../../shared/wire/telemetry.ts'

export type ReadMessage =
  | { kind: 'hello'; hello: HelloMessage }
  | { kind: 'frame'; frame: FrameMessage }
  /** `seq` where it could be read: the frame then counts as handled. */
  | { kind: 'malformed'; seq: number | null; detail: string }

const shortestSeconds = 0.25
const longestSeconds = 60
/** Decimals of the interval are rounded on the wire. */
const roundingSeconds = 0.01

export function readMessage(message: Buffer, isBinary: boolean): ReadMessage {
  if (isBinary) return malformed(null, 'messages are text, not binary')
  let value: unknown
  try {
    value = JSON.parse(message.toString('utf8'))
  } catch {
    return malformed(null, 'this is not JSON')
  }
  const parsed = stationMessage.safeParse(value)
  if (!parsed.success) return malformed(seqOf(value), faultsOf(parsed.error))
  if (parsed.data.type === 'hello') return { kind: 'hello', hello: parsed.data }
  const fault = frameFault(parsed.data)
  return fault === null ? { kind: 'frame', frame: parsed.data } : malformed(parsed.data.seq, fault)
}

const malformed = (seq: number | null, detail: string): ReadMessage => ({ kind: 'malformed', seq, detail })

function seqOf(value: unknown): number | null {
  if (typeof value !== 'object' || value === null || !('type' in value) || value.type !== 'frame') return null
  const seq = 'seq' in value ? value.seq : null
  return typeof seq === 'number' && Number.isSafeInteger(seq) && seq >= 1 ? seq : null
}

/** The first three faults, each with its place. */
const faultsOf = (error: z.ZodError): string =>
  error.issues
    .slice(0, 3)
    .map(({ path, message }) => (path.length === 0 ? message : `${path.join('.')}: ${message}`))
    .join('; ')
    .slice(0, 300)

function frameFault({ sensors, values, interval }: FrameMessage): string | null {
  if (new Set(sensors).size < sensors.length) return 'sensors: one is named twice'
  if (values.length !== sensors.length) return `values: ${values.length} series for ${sensors.length} sensors`
  const length = values[0]?.length ?? 0
  if (values.some((series) => series.length !== length)) return 'values: the series differ in length'
  const seconds = length * interval
  if (seconds < shortestSeconds - roundingSeconds || seconds > longestSeconds + roundingSeconds) {
    return `values: a frame holds ${shortestSeconds} to ${longestSeconds} s, this one ${Number(seconds.toPrecision(4))} s`
  }
  return null
}

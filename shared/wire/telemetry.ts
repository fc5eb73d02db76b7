/**
 * Telemetry: messages between a station and the server on `/telemetry`, subprotocol `offing.telemetry.1`,
 * text JSON, at most 64 KiB a message, `Authorization: Bearer <prefix>.<secret>`.
 */
import { z } from 'zod'

export const telemetryProtocol = 'offing.telemetry.1'
export const maxFrameBytes = 64 * 1024
export const heartbeatSeconds = 15

/** Close codes of the telemetry socket. */
export const telemetryClose = {
  tooLarge: 1009,
  serverRestarts: 1012,
  /** The database does not take readings now; nothing that was not acknowledged is stored. */
  tryAgainLater: 1013,
  malformed: 4400,
  keyRefused: 4401,
  retired: 4403,
  noPong: 4408,
  helloDoesNotFit: 4409,
  replaced: 4410,
  tooFast: 4429,
} as const

const isoTime = z.iso.datetime({ offset: true })

export const helloMessage = z.strictObject({
  type: z.literal('hello'),
  /** Code of the station. */
  station: z.string().min(1).max(16),
  /** Names the station's sequence; a new one when the station has lost its counter. */
  stream: z.uuid(),
  software: z.string().max(80),
  sampleRate: z.number().positive().max(64),
  sensors: z
    .array(
      z.strictObject({
        id: z.string().min(1).max(16),
        kind: z.enum(['pressure', 'surface']),
        unit: z.enum(['dbar', 'm']),
      }),
    )
    .min(1)
    .max(32),
  sentAt: isoTime,
})
export type HelloMessage = z.infer<typeof helloMessage>

export const frameMessage = z.strictObject({
  type: z.literal('frame'),
  /** From 1, without holes within a stream. */
  seq: z.number().int().min(1).max(Number.MAX_SAFE_INTEGER),
  /** Instrument time of the first sample. */
  start: isoTime,
  /** Seconds between samples. */
  interval: z.number().positive(),
  sensors: z.array(z.string().min(1).max(16)).min(1).max(32),
  /** values[i][n] = sensor i at start + n × interval; null = missing. */
  values: z.array(z.array(z.number().min(-1000).max(100000).nullable()).min(1).max(3840)).min(1).max(32),
  sentAt: isoTime,
})
export type FrameMessage = z.infer<typeof frameMessage>

export const stationMessage = z.discriminatedUnion('type', [helloMessage, frameMessage])

export const refusalCode = z.enum(['malformed', 'conflict', 'future', 'tooOld', 'unknownSensor', 'wrongInterval'])
export type RefusalCode = z.infer<typeof refusalCode>

export const telemetryServerMessage = z.discriminatedUnion('type', [
  z.object({
    type: z.literal('welcome'),
    /** Resend from this sequence number. */
    resumeFrom: z.number().int().min(1),
    serverTime: isoTime,
    heartbeatSeconds: z.number(),
    maxFrameBytes: z.number(),
  }),
  /** All frames up to seq are durable or put aside. */
  z.object({ type: z.literal('ack'), seq: z.number().int().min(0) }),
  /** This frame is put aside and counts as handled; seq null when it could not be read. */
  z.object({ type: z.literal('refused'), seq: z.number().int().nullable(), code: refusalCode, detail: z.string() }),
  /** Median of arrivedAt − sentAt. */
  z.object({ type: z.literal('clock'), offsetSeconds: z.number() }),
])
export type TelemetryServerMessage = z.infer<typeof telemetryServerMessage>

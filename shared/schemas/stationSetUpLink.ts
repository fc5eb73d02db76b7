/**
 * Keys and the telemetry link of a station.
 *
 *   GET  /api/stations/:stationId/keys                 action stationKeys.read     -> stationKeyView[]      (station.ts)
 *   POST /api/stations/:stationId/keys                 stationKeyOrder             -> 201 issuedStationKey  (shown once)
 *   POST /api/stations/:stationId/keys/rotate          keyRotation                 -> 201 issuedStationKey; the others end after the overlap
 *   POST /api/stations/:stationId/keys/:keyId/revoke                               -> stationKeyView; its connection closes at once
 *   GET  /api/stations/:stationId/health?from=&to=     action stationHealth.read   -> healthHour[] (station.ts), at most 31 days
 *   GET  /api/stations/:stationId/link                 action stationHealth.read   -> linkNow
 *   GET  /api/stations/:stationId/connections          action stationKeys.read     -> connectionAttempt[], newest first, at most 20
 *   GET  /api/connections                              action stationKeys.read     -> connectionAttempt[] of all, also with unknown keys
 *
 * Live: kind `connection` in room `connections`, body connectionAttempt, at most once a second an attempt.
 */
import { z } from 'zod'
import { linkView } from './station.ts'

const time = z.iso.datetime()

/** The keys that are valid now go on for so long beside the new one; 0 ends them at once. */
export const keyRotation = z.strictObject({
  overlapMinutes: z
    .number()
    .int()
    .min(0)
    .max(30 * 24 * 60),
})

export const sensorLinkNow = z.object({
  letter: z.string(),
  serial: z.string(),
  kind: z.enum(['pressure', 'surface']),
  /** Share of the last 20 minutes that is there, 0 to 1. */
  recordShare: z.number(),
  /** Newest reading, in metres or decibars; null: missing. */
  newestValue: z.number().nullable(),
  newestAt: time.nullable(),
  /** Confirmed offset of its clock in force, s; null: none. */
  confirmedClockOffset: z.number().nullable(),
  /** How far its clock is off the others' by the newest estimate's fit, s; null: not to be determined. */
  fittedClockOffset: z.number().nullable(),
  fittedClockOffsetSd: z.number().nullable(),
})

export const linkNow = z.object({
  stationId: z.number().int(),
  /** Connection, newest reading, station's clock less the server's, share of the record. */
  link: linkView,
  connectedSince: time.nullable(),
  software: z.string().nullable(),
  /** Hz as ordered, and samples a second and sensor over the last minute. */
  sampleRate: z.number(),
  arrivingRate: z.number().nullable(),
  /** Arrival less the end of the newest frame; median over the last minute, s. */
  latencySeconds: z.number().nullable(),
  sensors: z.array(sensorLinkNow),
})
export type LinkNow = z.infer<typeof linkNow>

export const connectionAttempt = z.object({
  /** Counts up within a start of the server. */
  id: z.number().int(),
  /** Null: the key is unknown. */
  stationId: z.number().int().nullable(),
  stationCode: z.string().nullable(),
  /** First part of the key, as it stands in the list of keys; null: none was sent. */
  keyPrefix: z.string().nullable(),
  keyState: z.enum(['valid', 'unknown', 'revoked', 'expired', 'missing']),
  remoteAddress: z.string(),
  startedAt: time,
  endedAt: time.nullable(),
  /** How far it came. */
  reached: z.enum(['opened', 'keyAccepted', 'welcomed', 'streaming']),
  closeCode: z.number().int().nullable(),
  closeReason: z.string().nullable(),
  /** What is wrong, in plain words with what to do; null: nothing. */
  trouble: z.string().nullable(),
  /** What it said of itself. */
  hello: z
    .object({
      station: z.string(),
      software: z.string(),
      sampleRate: z.number(),
      sensors: z.array(z.object({ id: z.string(), kind: z.string(), unit: z.string() })),
      clockOffsetSeconds: z.number(),
    })
    .nullable(),
  /** Where hello does not fit the deployment: all of it. */
  differences: z.array(z.string()),
  frames: z.number().int(),
  acknowledged: z.number().int(),
  refusals: z.array(z.object({ code: z.string(), count: z.number().int(), detail: z.string() })),
  lastFrame: z
    .object({
      seq: z.number().int(),
      start: time,
      arrivedAt: time,
      /** Last value of each sensor. */
      values: z.array(z.object({ sensor: z.string(), value: z.number().nullable() })),
    })
    .nullable(),
})
export type ConnectionAttempt = z.infer<typeof connectionAttempt>

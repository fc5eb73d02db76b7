/**
 * What is measured or foretold beside the array: level of the water, tide table, pressure of the air, wind.
 *
 *   GET  /api/stations/:stationId/auxiliary            action auxiliary.read    -> auxiliaryView[] (all kinds, with or without values)
 *   GET  /api/stations/:stationId/auxiliary/:kind?from=&to=  at most 31 days    -> auxiliaryReadingView[]
 *   POST /api/stations/:stationId/auxiliary            auxiliaryBatch, action auxiliary.change           -> auxiliaryOutcome
 *   POST /api/stations/:stationId/auxiliary/push       auxiliaryBatch, `Authorization: Bearer KEY` of the station, `X-Offing: 1`
 *                                                      and `Content-Type: application/json`; no session  -> auxiliaryOutcome
 * A file goes by the uploads with kind `auxiliary`.
 */
import { z } from 'zod'
import { qualityFlag } from './estimate.ts'

const time = z.iso.datetime()

export const auxiliaryKind = z.enum(['waterLevel', 'tide', 'barometer', 'windSpeed', 'windFrom'])
export type AuxiliaryKind = z.infer<typeof auxiliaryKind>

/** Metres above datum; pascals; m/s; degrees true. */
export const auxiliaryReading = z.strictObject({
  kind: auxiliaryKind,
  at: z.iso.datetime({ offset: true }),
  value: z.number(),
  /** One standard deviation; null: not known. */
  sd: z.number().min(0).nullable().optional(),
  /** QARTOD; absent: judged here by range and rate. */
  qualityFlag: qualityFlag.optional(),
})
export type AuxiliaryReadingGiven = z.infer<typeof auxiliaryReading>

export const auxiliaryBatch = z.strictObject({ readings: z.array(auxiliaryReading).min(1).max(2000) })

export const auxiliaryOutcome = z.object({
  stored: z.number().int(),
  /** There already with the same value; with another (the newer one holds, the older is in the audit). */
  repeated: z.number().int(),
  replaced: z.number().int(),
  flagged: z.number().int(),
})

export const auxiliaryReadingView = z.object({
  at: time,
  value: z.number(),
  sd: z.number().nullable(),
  qualityFlag,
  source: z.enum(['push', 'entered', 'file']),
})

export const auxiliaryView = z.object({
  kind: auxiliaryKind,
  unit: z.string(),
  /** Newest that does not lie in the future; of a tide table the nearest to now. */
  newest: auxiliaryReadingView.nullable(),
  /** How far ahead a tide table reaches. */
  reachesUntil: time.nullable(),
  /** A window uses a single value at most so far from its middle, s; between two it draws a line. */
  reachSeconds: z.number(),
  /** Is there one that the window ending now would use? */
  isUsed: z.boolean(),
  /** What it is used for, and what is lost without it: sentences. */
  usedFor: z.string(),
  lostWithout: z.string(),
})
export type AuxiliaryView = z.infer<typeof auxiliaryView>

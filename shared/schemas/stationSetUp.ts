/**
 * Stations as an administrator sets them up. SI units; directions in degrees true; times ISO 8601 UTC. Actions
 * `stationSetUp.read` and `stationSetUp.change`; every answer of one station carries `ETag` with its version.
 *
 *   GET  /api/stationRecords                      all stations, retired ones too                 -> stationRecord[]
 *   GET  /api/stations/:stationId/record          one                                            -> stationRecord
 *   GET  /api/stations/:stationId/stationFile     the array in force as a file (stationFile.ts); 409 without one -> stationFile
 *   POST /api/stations                            stationDraft                                   -> 201 stationRecord
 *   PUT  /api/stations/:stationId                 stationChange, If-Match "version"              -> stationRecord
 *   POST /api/stations/:stationId/retire          { reason }, If-Match                           -> stationRecord
 *   POST /api/stations/:stationId/restore         { reason }, If-Match; comes back in maintenance -> stationRecord
 *   POST /api/stations/:stationId/settings        stationSettingsOrder, If-Match of the station  -> 201 stationSettingsRecord
 *   GET  /api/stations/:stationId/settings/history  versions, newest first                       -> stationSettingsRecord[]
 *
 * 412 brings the other's `stationRecord` as `current`; 428 where If-Match is missing; 422 names the field in
 * `errors[].path` as the body names it (`code`, `settings.windowSeconds`). The shortest window allowed is 300 s: sent
 * as back-fill (`--backfill 6m`) it is there within seconds.
 */
import { z } from 'zod'
import { stationSettingsContent } from './stationSettings.ts'

const time = z.iso.datetime()
const reason = z.string().trim().min(3, 'say why in a few words').max(500)

export const latitude = z.number().min(-90).max(90)
export const longitude = z.number().min(-180).max(180)

/** GeoJSON (RFC 7946): longitude before latitude, rings closed. */
export const areaPolygon = z.strictObject({
  type: z.literal('Polygon'),
  coordinates: z.array(z.array(z.tuple([longitude, latitude])).min(4)).min(1),
})

const stationFields = {
  /** On the wire and in file names: letters, digits and dashes. */
  code: z
    .string()
    .trim()
    .regex(/^[A-Za-z0-9][A-Za-z0-9-]{0,15}$/, '1 to 16 letters, digits or dashes, beginning with a letter or digit'),
  shortName: z.string().trim().min(1, 'a short name is needed').max(24),
  name: z.string().trim().min(1, 'a name is needed').max(80),
  /** WGS 84, degrees; the origin of the array's grid. */
  latitude,
  longitude,
  /** What levels are above, such as "chart datum". */
  datumName: z.string().trim().min(1).max(40),
  /** Height of the station's datum above the national datum, m. */
  datumOffset: z.number().min(-200).max(200),
  /** When that offset was surveyed; null: not known. Older than a year is worth a warning. */
  datumSurveyedOn: z.iso.date().nullable(),
  /** A picture older than this is shown as stale, s. */
  staleAfterSeconds: z.number().int().min(60).max(86_400),
  areaPolygon: areaPolygon.nullable(),
  notes: z.string().max(4000),
}

/** Hz; a whole number of samples a minute. */
export const sampleRate = z
  .number()
  .positive()
  .max(64)
  .refine((rate) => Math.abs(rate * 60 - Math.round(rate * 60)) < 1e-6, 'give a whole number of samples a minute')

/** What decides how a station's windows are cut and computed from a time on. */
export const stationSettingsDraft = z.strictObject({ sampleRate, content: stationSettingsContent })
export type StationSettingsDraft = z.infer<typeof stationSettingsDraft>

/** A new station begins in maintenance when its array is not in the water yet. */
export const stationDraft = z.strictObject({
  ...stationFields,
  state: z.enum(['active', 'maintenance']),
  settings: stationSettingsDraft,
  reason,
})
export type StationDraft = z.infer<typeof stationDraft>

/** All fields anew. In maintenance the station's limits are suppressed by design. Settings have their own route. */
export const stationChange = z.strictObject({ ...stationFields, state: z.enum(['active', 'maintenance']), reason })
export type StationChange = z.infer<typeof stationChange>

/** In force from `validFrom`; null: from now. Never in the past: readings were taken and computed as they were. */
export const stationSettingsOrder = z.strictObject({
  ...stationSettingsDraft.shape,
  validFrom: time.nullable(),
  reason,
})
export type StationSettingsOrder = z.infer<typeof stationSettingsOrder>

export const stationSettingsRecord = z.object({
  id: z.number().int(),
  validFrom: time,
  /** In force now. */
  isInForce: z.boolean(),
  sampleRate: z.number(),
  content: stationSettingsContent,
  author: z.string().nullable(),
  reason: z.string(),
})
export type StationSettingsRecord = z.infer<typeof stationSettingsRecord>

export const stationRecord = z.object({
  id: z.number().int(),
  version: z.number().int(),
  ...stationFields,
  code: z.string(),
  state: z.enum(['active', 'maintenance', 'retired']),
  retiredAt: time.nullable(),
  createdAt: time,
  updatedAt: time,
  /** Hz, in force now. */
  sampleRate: z.number(),
  /** In force now, and what is already ordered for later. */
  settings: stationSettingsRecord.nullable(),
  comingSettings: z.array(stationSettingsRecord),
  /** In force now; `number` counts the deployments of the station from 1. */
  deployment: z.object({ id: z.number().int(), number: z.number().int(), validFrom: time }).nullable(),
  comingDeployments: z.array(z.object({ id: z.number().int(), number: z.number().int(), validFrom: time })),
  drafts: z.number().int(),
  /** Keys that open a connection now. */
  validKeys: z.number().int(),
  /** How much hangs on it, said before it is retired. */
  limits: z.number().int(),
  firstReadingAt: time.nullable(),
})
export type StationRecord = z.infer<typeof stationRecord>

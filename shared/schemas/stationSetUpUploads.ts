/**
 * Files of readings: first brought in, then checked without storing anything, then stored, all or nothing, and undone by
 * import. Actions `imports.read`, `imports.change`.
 *
 *   POST /api/stations/:stationId/uploads?kind=readings&fileName=NAME
 *        body: the file itself, streamed, `Content-Type: text/csv` (with `X-Offing: 1`)   -> 201 uploadView, state received
 *   GET  /api/stations/:stationId/uploads            open ones, newest first              -> uploadView[]
 *   GET  /api/uploads/:uploadId                                                           -> uploadView
 *   POST /api/uploads/:uploadId/check   { layout }   dry run as a long job                -> 202 uploadView, state checking
 *   POST /api/uploads/:uploadId/store   { layout }   long job, all or nothing             -> 202 uploadView, state storing
 *   DELETE /api/uploads/:uploadId       discards the file; 409 while it is being stored   -> 204
 *   GET  /api/stations/:stationId/imports            newest first                         -> importView[]
 *   POST /api/imports/:importId/undo    { reason }                                        -> importView
 *
 * Progress comes as `job` events in room `system` and by GET /api/jobs/:jobId; POST /api/jobs/:jobId/cancel stops the work
 * and nothing of the file is stored. Times without a zone are UTC unless `utcOffsetMinutes` says otherwise.
 */
import { z } from 'zod'

const time = z.iso.datetime()

/** `readings`: the array's sensors. The others: one value a row. */
export const uploadKind = z.enum(['readings', 'auxiliary'])

/** Turned into what is stored: decibars (pressure), metres (surface, levels), pascals (barometer), m/s and degrees (wind). */
export const readingUnit = z.enum([
  'm',
  'cm',
  'mm',
  'ft',
  'dbar',
  'bar',
  'mbar',
  'hPa',
  'kPa',
  'Pa',
  'psi',
  'm/s',
  'kn',
  '°',
])
export type ReadingUnit = z.infer<typeof readingUnit>

export const timeForm = z.enum(['iso', 'epochSeconds', 'epochMilliseconds'])

/** How a file is to be read. Columns by their heading. */
export const uploadLayout = z.strictObject({
  delimiter: z.enum([',', ';', '\t']),
  decimal: z.enum(['.', ',']),
  /** Lines above the heading, to be passed over. */
  linesAbove: z.number().int().min(0).max(200),
  timeColumn: z.string().max(120),
  /** A clock time in a column of its own beside the date; null: the time column says both. */
  clockColumn: z.string().max(120).nullable(),
  timeForm,
  /** Of times that name no zone. */
  utcOffsetMinutes: z
    .number()
    .int()
    .min(-14 * 60)
    .max(14 * 60),
  columns: z
    .array(
      z.strictObject({
        column: z.string().max(120),
        /** Letter of the sensor; of auxiliary files the quantity (`waterLevel`, `tide`, `barometer`, `windSpeed`, `windFrom`). */
        letter: z.string().max(16),
        /** Null: as stored. */
        unit: readingUnit.nullable(),
      }),
    )
    .min(1)
    .max(32),
  /** Cells that mean "missing" beside the empty one, such as `-9999`. */
  missing: z.array(z.string().max(20)).max(10),
})
export type UploadLayout = z.infer<typeof uploadLayout>

export const uploadFault = z.object({
  /** Line of the file, the first being 1; null where it concerns the whole. */
  row: z.number().int().nullable(),
  reason: z.string(),
})

export const uploadReport = z.object({
  rows: z.number().int(),
  minutes: z.number().int(),
  /** Samples that would be or were stored, that stand there already, that stand there with another value. */
  stored: z.number().int(),
  repeated: z.number().int(),
  conflicting: z.number().int(),
  startsAt: time.nullable(),
  endsAt: time.nullable(),
  /** At most the first hundred. With one of them nothing of the file is stored. */
  faults: z.array(uploadFault),
})
export type UploadReport = z.infer<typeof uploadReport>

export const uploadView = z.object({
  id: z.number().int(),
  stationId: z.number().int(),
  kind: uploadKind,
  fileName: z.string(),
  bytes: z.number().int(),
  state: z.enum(['received', 'checking', 'checked', 'storing', 'stored', 'failed', 'cancelled']),
  /** First lines as they stand in the file, and what is made of them. */
  sample: z.array(z.string()),
  headings: z.array(z.string()),
  /** Guessed from the first lines, or as last used. */
  layout: uploadLayout.nullable(),
  /** Why nothing could be guessed. */
  reason: z.string().nullable(),
  report: uploadReport.nullable(),
  jobId: z.number().int().nullable(),
  importId: z.number().int().nullable(),
  createdAt: time,
})
export type UploadView = z.infer<typeof uploadView>

export const uploadOrder = z.strictObject({ layout: uploadLayout })

export const importView = z.object({
  id: z.number().int(),
  stationId: z.number().int(),
  kind: z.enum(['readings', 'auxiliary', 'demonstration']),
  fileName: z.string(),
  status: z.enum(['running', 'done', 'failed', 'undone']),
  report: uploadReport,
  person: z.string().nullable(),
  createdAt: time,
  undoneAt: time.nullable(),
})
export type ImportView = z.infer<typeof importView>

/**
 * Recomputing a past span of a station into a labelled version beside the operational record, which stays as it is.
 *
 *   GET  /api/stations/:stationId/runs                     -> runView[], newest first
 *   POST /api/stations/:stationId/runs         runOrder    -> 201 runView; its progress is that of a long job
 *   GET  /api/stations/:stationId/runs/choices             -> runChoices
 *   GET  /api/stations/:stationId/runs/:runId/comparison   -> runComparison
 *
 * A run is cancelled through its job: POST /api/jobs/:jobId/cancel.
 */
import { z } from 'zod'
import { stationSettingsContent } from './stationSettings.ts'

const time = z.iso.datetime()
const { bandFrom, bandTo, leastHeight, leastPressureResponse } = stationSettingsContent.shape.estimate.shape

/** What a run may set otherwise than the version of the settings it begins from. */
export const runChanges = z.strictObject({
  windowSeconds: stationSettingsContent.shape.windowSeconds.optional(),
  bandFrom: bandFrom.optional(),
  bandTo: bandTo.optional(),
  leastHeight: leastHeight.optional(),
  leastPressureResponse: leastPressureResponse.optional(),
})
export type RunChanges = z.infer<typeof runChanges>

export const runOrder = z
  .strictObject({
    label: z.string().trim().min(3, 'a label of three characters at least').max(120),
    reason: z.string().trim().min(3, 'say why in a few words').max(500),
    /** Windows that end after `startsAt` and not after `endsAt`. */
    startsAt: time,
    endsAt: time,
    /** Every window of the hop, or only those that end at multiples of so many seconds. */
    stepSeconds: z.number().int().min(10).max(86_400),
    /** Null: those in force at each window. */
    settingsId: z.number().int().positive().nullable(),
    changes: runChanges,
    /** A correction of a past deployment, or any other one; null: that in force at each window. */
    deploymentId: z.number().int().positive().nullable(),
  })
  .refine(({ startsAt, endsAt }) => Date.parse(endsAt) > Date.parse(startsAt), {
    path: ['endsAt'],
    message: 'must be after the beginning',
  })
  .refine(({ startsAt, endsAt }) => Date.parse(endsAt) - Date.parse(startsAt) <= 31 * 86_400_000, {
    path: ['startsAt'],
    message: 'must be at most 31 days before the end',
  })
  .refine(({ changes }) => !(changes.bandFrom && changes.bandTo) || changes.bandTo > changes.bandFrom, {
    path: ['changes.bandTo'],
    message: 'must be above the lowest frequency',
  })
export type RunOrder = z.infer<typeof runOrder>

export const runView = z.object({
  id: z.number().int(),
  jobId: z.number().int().nullable(),
  label: z.string(),
  reason: z.string(),
  startsAt: time,
  endsAt: time,
  stepSeconds: z.number().int(),
  settingsId: z.number().int().nullable(),
  changes: runChanges,
  deploymentId: z.number().int().nullable(),
  status: z.enum(['queued', 'running', 'done', 'failed', 'cancelled']),
  /** 0 to 1 */
  progress: z.number(),
  detail: z.string().nullable(),
  orderedBy: z.string().nullable(),
  createdAt: time,
})
export type RunView = z.infer<typeof runView>

export const runChoices = z.object({
  settings: z.array(z.object({ id: z.number().int(), validFrom: time, reason: z.string(), windowSeconds: z.number() })),
  deployments: z.array(
    z.object({
      id: z.number().int(),
      validFrom: time,
      recordedAt: time,
      reason: z.string(),
      /** The version that this one corrects; null for one that was in force. */
      replacesId: z.number().int().nullable(),
    }),
  ),
  /** First and last end of a window with readings behind it; null without any. */
  firstWindow: time.nullable(),
  lastWindow: time.nullable(),
})
export type RunChoices = z.infer<typeof runChoices>

const figures = z.object({
  resolved: z.boolean(),
  significantWaveHeight: z.number().nullable(),
  toward: z.number().nullable(),
  speed: z.number().nullable(),
  period: z.number().nullable(),
})

/** One window of both; differences are run less operational record, null where either has none. */
export const comparedWindow = z.object({
  windowEndsAt: time,
  operational: figures,
  run: figures,
  isSame: z.boolean(),
  height: z.number().nullable(),
  /** Degrees, -180 to 180. */
  heading: z.number().nullable(),
  speed: z.number().nullable(),
})

export const runComparison = z.object({
  runId: z.number().int(),
  /** Windows of the run, and those that the operational record has too. */
  windows: z.number().int(),
  compared: z.number().int(),
  /** Results equal bit for bit. */
  same: z.number().int(),
  /** Other program versions than the run's among the operational windows compared. */
  otherVersions: z.array(z.string()),
  /** A vector in the run alone, in the operational record alone. */
  resolvedInRunOnly: z.number().int(),
  resolvedInRecordOnly: z.number().int(),
  /** The window with the largest difference of each; null where none can be compared. */
  largest: z.object({
    height: comparedWindow.nullable(),
    heading: comparedWindow.nullable(),
    speed: comparedWindow.nullable(),
  }),
  /** Mean of the differences, with their sign. */
  mean: z.object({ height: z.number().nullable(), heading: z.number().nullable(), speed: z.number().nullable() }),
  /** At most fifty windows, those that differ most in heading, speed or height first. */
  most: z.array(comparedWindow),
})
export type RunComparison = z.infer<typeof runComparison>
export type ComparedWindow = z.infer<typeof comparedWindow>

/**
 * Surveys of an array: drafts that are worked on, and versions that are in force from a time on and never edited.
 * Actions `stationSetUp.read`, `stationSetUp.change`. Positions are metres from the station's position on the local
 * grid, true north.
 *
 *   GET  /api/stations/:stationId/deployments/history            all versions, newest first; corrections too -> deploymentRecord[]
 *   GET  /api/stations/:stationId/deployments/:deploymentId/comparison/:otherId                     -> deploymentComparison
 *   GET  /api/stations/:stationId/deploymentDrafts               open drafts                        -> deploymentDraftView[]
 *   POST /api/stations/:stationId/deploymentDrafts               deploymentDraftOrder               -> 201 deploymentDraftView
 *   GET  /api/stations/:stationId/deploymentDrafts/:draftId                                         -> deploymentDraftView
 *   PUT  /api/stations/:stationId/deploymentDrafts/:draftId      deploymentDraftContent, If-Match   -> deploymentDraftView
 *   DELETE /api/stations/:stationId/deploymentDrafts/:draftId    If-Match                           -> 204
 *   GET  /api/stations/:stationId/deploymentDrafts/:draftId/designCheck                             -> designCheck
 *   POST /api/stations/:stationId/deploymentDrafts/:draftId/putInForce  deploymentOrder, If-Match   -> 201 deploymentRecord
 *   POST /api/stations/:stationId/surveyPreviews                 surveyQuestion (see stationSetUpSurvey.ts)
 *
 * 412 brings the other's `deploymentDraftView` as `current`. `putInForce` answers 409 `deployment.checkUnresolved` with
 * the findings as `current` while one has no reason.
 */
import { z } from 'zod'
import { latitude, longitude } from './stationSetUp.ts'

const time = z.iso.datetime()
const reason = z.string().trim().min(3, 'say why in a few words').max(500)
const metres = z.number().min(-20_000).max(20_000)

/** Where a sensor stands, as it was surveyed: what was typed is kept as it was typed. */
export const sensorPosition = z.discriminatedUnion('by', [
  z.strictObject({ by: z.literal('grid'), east: metres, north: metres }),
  z.strictObject({ by: z.literal('geographic'), latitude, longitude }),
  /** Range in metres and true bearing from the station's position, or from another sensor by its letter. */
  z.strictObject({
    by: z.literal('polar'),
    range: z.number().min(0).max(20_000),
    bearing: z.number().min(0).max(360),
    from: z.string().nullable(),
  }),
])
export type SensorPosition = z.infer<typeof sensorPosition>

export const draftSensor = z.strictObject({
  /** Its id on the wire. */
  letter: z
    .string()
    .trim()
    .regex(/^[A-Za-z0-9][A-Za-z0-9._-]{0,15}$/, '1 to 16 letters, digits, dots or dashes'),
  /** Names the instrument in the register; a new one is entered there when the draft is put in force. */
  serial: z.string().trim().min(1, 'a serial number is needed').max(40),
  kind: z.enum(['pressure', 'surface']),
  position: sensorPosition,
  /** m */
  heightAboveBed: z.number().min(0).max(200),
  /** One standard deviation of east and of north, m. */
  positionSd: z.number().min(0).max(50),
  /** One standard deviation of the sensor's clock against the others', s. */
  clockSd: z.number().min(0).max(10),
  /** value × scale + offset, in metres or decibars. */
  scale: z
    .number()
    .min(-1000)
    .max(1000)
    .refine((scale) => scale !== 0, 'must not be 0'),
  offset: z.number().min(-10_000).max(10_000),
  /** Of pressure sensors: above the air (gauge), or with the air's pressure in it (absolute). */
  pressureKind: z.enum(['gauge', 'absolute']),
})
export type DraftSensor = z.infer<typeof draftSensor>

export const deploymentDraftContent = z
  .strictObject({
    /** Still water depth below datum, m. */
    waterDepth: z.number().positive().max(200),
    /** Height of the bed against the station's datum, m; negative below it. */
    levelOfBed: z.number().min(-200).max(200),
    surveyedOn: z.iso.date().nullable(),
    notes: z.string().max(2000),
    sensors: z.array(draftSensor).min(1).max(32),
  })
  .superRefine(({ sensors }, context) => {
    for (const field of ['letter', 'serial'] as const) {
      sensors.forEach((sensor, index) => {
        const first = sensors.findIndex((other) => other[field].toLowerCase() === sensor[field].toLowerCase())
        if (first < index) context.addIssue({ code: 'custom', path: ['sensors', index, field], message: `${sensor[field]} is there twice` }) // prettier-ignore
      })
    }
  })
export type DeploymentDraftContent = z.infer<typeof deploymentDraftContent>

/**
 * What a draft begins with: a copy of `basedOnId`, or `content`. With `correctsId` it is a correction of that version
 * of the past, used by recompute runs alone. One draft a station is open for a new version, and one a version for its
 * correction: 409 `deploymentDraft.open`.
 */
export const deploymentDraftOrder = z.strictObject({
  basedOnId: z.number().int().positive().nullable(),
  correctsId: z.number().int().positive().nullable(),
  content: deploymentDraftContent.nullable(),
})

/** A sensor with its place on the grid, whichever way it was surveyed. */
export const placedSensor = z.object({
  ...draftSensor.shape,
  letter: z.string(),
  east: z.number(),
  north: z.number(),
})
export type PlacedSensor = z.infer<typeof placedSensor>

export const deploymentDraftView = z.object({
  id: z.number().int(),
  version: z.number().int(),
  stationId: z.number().int(),
  /** The number it gets when it is put in force. */
  number: z.number().int(),
  basedOnId: z.number().int().nullable(),
  correctsId: z.number().int().nullable(),
  content: deploymentDraftContent,
  placed: z.array(placedSensor),
  author: z.string().nullable(),
  updatedAt: time,
})
export type DeploymentDraftView = z.infer<typeof deploymentDraftView>

/** Why a check that is not good may stand. */
export const resolvedCheck = z.strictObject({ check: z.string().min(1).max(60), reason })

export const deploymentOrder = z.strictObject({
  /**
   * Null: from now. A new version may begin in the past or the future, after the one before it; running stations are
   * told when it begins (close 4409 with the difference, until their `hello` fits).
   * Where readings are already stored after it, it has to be a correction.
   */
  validFrom: time.nullable(),
  reason,
  resolved: z.array(resolvedCheck).max(60),
})
export type DeploymentOrder = z.infer<typeof deploymentOrder>

export const deploymentRecord = z.object({
  id: z.number().int(),
  /** Counted from 1 by time of coming into force; of a correction that of the version it corrects. */
  number: z.number().int(),
  validFrom: time,
  /** Null: still in force. */
  validUntil: time.nullable(),
  isInForce: z.boolean(),
  recordedAt: time,
  /** A correction of the past: used by recompute runs alone. */
  replacesId: z.number().int().nullable(),
  waterDepth: z.number(),
  levelOfBed: z.number(),
  surveyedOn: z.string().nullable(),
  notes: z.string(),
  author: z.string().nullable(),
  reason: z.string(),
  /** Findings that were not good when it was put in force, with what was written. */
  resolved: z.array(resolvedCheck),
  sensors: z.array(placedSensor.extend({ sensorId: z.number().int() })),
})
export type DeploymentRecord = z.infer<typeof deploymentRecord>

/** `before` to `after`, sensor by sensor. */
export const deploymentComparison = z.object({
  beforeId: z.number().int(),
  afterId: z.number().int(),
  waterDepthChange: z.number(),
  levelOfBedChange: z.number(),
  sensors: z.array(
    z.object({
      letter: z.string(),
      change: z.enum(['same', 'moved', 'added', 'removed', 'replaced', 'altered']),
      /** How far and where to (degrees true) on the grid; null where it stands in one of the two only. */
      movedBy: z.number().nullable(),
      movedToward: z.number().nullable(),
      /** One standard deviation of the distance, from both surveys. */
      movedBySd: z.number().nullable(),
      raisedBy: z.number().nullable(),
      /** What else differs: `serial 4101 to 4188`. */
      others: z.array(z.string()),
    }),
  ),
})
export type DeploymentComparison = z.infer<typeof deploymentComparison>

/**
 * A survey file, CSV (`,` `;` or tab; decimal point or comma; with or without a byte order mark) or GeoJSON, read without
 * changing anything: the page calls `shared/surveys/readSurvey.ts` itself, programs the route. What is taken over goes
 * into a draft by its own PUT.
 *
 *   POST /api/stations/:stationId/surveyPreviews   surveyQuestion -> surveyPreview   (action `stationSetUp.change`)
 */
import { z } from 'zod'
import { draftSensor } from './stationSetUpDeployments.ts'

export const surveyField = z.enum([
  'letter',
  'serial',
  'kind',
  'east',
  'north',
  'latitude',
  'longitude',
  'range',
  'bearing',
  'heightAboveBed',
  'level',
  'positionSd',
  'clockSd',
  'scale',
  'offset',
  'pressureKind',
])
export type SurveyField = z.infer<typeof surveyField>

/** Column heading (CSV) or property name (GeoJSON) for each field; absent: not in the file. */
export const surveyMapping = z.partialRecord(surveyField, z.string())
export type SurveyMapping = z.infer<typeof surveyMapping>

/** What a row does not say. */
export const surveyDefaults = z.strictObject({
  kind: z.enum(['pressure', 'surface']),
  heightAboveBed: z.number(),
  positionSd: z.number(),
  clockSd: z.number(),
  pressureKind: z.enum(['gauge', 'absolute']),
  /** Of the station's bed against datum, m: a `level` column (height against datum) less this is the height above the bed. */
  levelOfBed: z.number(),
})
export type SurveyDefaults = z.infer<typeof surveyDefaults>

export const surveyQuestion = z.strictObject({
  fileName: z.string().max(255),
  text: z.string().max(200_000),
  /** Null: guessed from the headings. */
  mapping: surveyMapping.nullable(),
  defaults: surveyDefaults,
})

export const surveyFault = z.object({
  /** Counted from 1, the heading being line 1; of GeoJSON the number of the feature; null where it concerns the whole. */
  line: z.number().int().nullable(),
  column: z.string().nullable(),
  /** What is wrong and how to mend it. */
  reason: z.string(),
})
export type SurveyFault = z.infer<typeof surveyFault>

export const surveyPreview = z.object({
  form: z.enum(['csv', 'geojson']),
  delimiter: z.enum([',', ';', '\t']).nullable(),
  hasDecimalComma: z.boolean(),
  /** Headings or property names that there are. */
  columns: z.array(z.string()),
  mapping: surveyMapping,
  /** As many rows as the file has, each as it stands in the file. */
  rows: z.array(z.object({ line: z.number().int(), cells: z.array(z.string()) })),
  /** Sensors of the rows without a fault. */
  sensors: z.array(draftSensor),
  /** Nothing may be taken over while there is one. */
  faults: z.array(surveyFault),
})
export type SurveyPreview = z.infer<typeof surveyPreview>

/**
 * Local fit: logged observations held against what was figured, with the evidence for coefficients of the place's own. Routes:
 * `shared/schemas/placeObservation.ts`. Numbers as `shared/hazards/localFit.ts` gives them, SI.
 */
import { z } from 'zod'
import { placeQuantityKey } from './placeQuantity.ts'

const time = z.iso.datetime()
const reason = z.string().trim().min(3).max(500)

/** What people log: `shared/schemas/placeObservation.ts` has the forms. */
export const observationKind = z.enum([
  'breakerHeight',
  'runUp',
  'crossSea',
  'longSwell',
  'ripSeen',
  'overtoppingSeen',
  'surgeTrouble',
])
export type ObservationKind = z.infer<typeof observationKind>

/** One coefficient set that is in force at a place: part of its settings. */
const evidence = {
  observed: observationKind,
  /** Observations behind it, and their span. */
  count: z.number().int().min(100, 'needs 100 observations or more'),
  from: time,
  to: time,
}
const strictCoefficient = z.strictObject({ value: z.number(), standardError: z.number().min(0) })
export const adoptedFit = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('heights'),
    ...evidence,
    /** Times the figure. */
    factor: strictCoefficient.extend({ value: z.number().min(0.05).max(20) }),
  }),
  z.strictObject({
    kind: z.literal('sightings'),
    ...evidence,
    /** ln(p/(1−p)) = intercept + slope · x; x the figure, of overtopping its logarithm to base ten. */
    intercept: strictCoefficient,
    slope: strictCoefficient,
    /** Of intercept and slope, row by row. */
    covariance: z.array(z.number()).length(4),
    /** Of x, as observed: beyond it nothing is said. */
    range: z.strictObject({ from: z.number(), to: z.number() }),
  }),
])
export type AdoptedFit = z.infer<typeof adoptedFit>

const coefficient = z.object({ value: z.number(), standardError: z.number() })
const bin = z.object({
  ...{ from: z.number(), to: z.number(), count: z.number().int() },
  ...{ meanPredicted: z.number(), meanObserved: z.number(), standardError: z.number() },
})
const gain = z.object({ mean: z.number(), standardError: z.number(), isEvident: z.boolean() })
const agreement = z.object({
  /** Mean of predicted less observed. */
  bias: z.number(),
  rmse: z.number(),
  scatterIndex: z.number(),
  correlation: z.number().nullable(),
})
const scores = z.object({ brier: z.number(), logLoss: z.number() })

const heightsFit = z.object({
  kind: z.literal('heights'),
  count: z.number().int(),
  asPredicted: agreement,
  /** With the factor, each stretch of time predicted from the others. */
  crossValidated: agreement,
  bins: z.array(bin),
  factor: coefficient,
  gain,
})
const sightingsFit = z.object({
  kind: z.literal('sightings'),
  count: z.number().int(),
  seen: z.number().int(),
  intercept: coefficient,
  coefficients: z.array(coefficient),
  covariance: z.array(z.number()),
  observedRange: z.array(z.object({ from: z.number(), to: z.number() })),
  bins: z.array(bin),
  calibration: z.array(bin),
  withoutPrediction: scores,
  crossValidated: scores,
  gain,
  evenChanceAt: coefficient.nullable(),
})

export const localFitView = z.object({
  observed: observationKind,
  /** As the form calls it. */
  label: z.string(),
  predictedBy: placeQuantityKey,
  /** x is the figure's logarithm to base ten. */
  isLogarithmic: z.boolean(),
  outcome: z.discriminatedUnion('kind', [
    z.object({
      kind: z.literal('refused'),
      reason: z.string(),
      count: z.number().int(),
      needed: z.number().int(),
      days: z.number().int(),
    }),
    z.object({
      kind: z.literal('fitted'),
      fit: z.discriminatedUnion('kind', [heightsFit, sightingsFit]),
      days: z.number().int(),
      from: time,
      to: time,
      verdict: z.enum(['better', 'no evidence']),
      words: z.string(),
    }),
  ]),
  /** What the settings in force have of it. */
  adopted: adoptedFit.nullable(),
})
export type LocalFitView = z.infer<typeof localFitView>

/** Takes what the newest fit proposes into a new version of the settings; `adopt` false: takes it out again. Needs If-Match. */
export const localFitAdoption = z.strictObject({ observed: observationKind, adopt: z.boolean(), reason })
export type LocalFitAdoption = z.infer<typeof localFitAdoption>

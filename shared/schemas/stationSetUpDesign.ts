/**
 * What the design check says of an array. Worked out by `shared/arrayDesign/checkDesign.ts` on both sides: the page
 * calls it while sensors are dragged, the server before a draft is put in force. Directions in degrees true, SI units.
 */
import { z } from 'zod'

/** What the array is asked about. */
export const designQuestion = z.object({
  /** m */
  waterDepth: z.number(),
  gravity: z.number(),
  /** Periods the station is to read, s. */
  periodFrom: z.number(),
  periodTo: z.number(),
  /** Record length, s. */
  windowSeconds: z.number(),
  /** The sea by which errors are told: peak period s, height m, spread degrees (√(2(1 − m1))), noise of one reading m. */
  sea: z.object({
    significantWaveHeight: z.number(),
    peakPeriod: z.number(),
    directionalSpread: z.number(),
    noiseSd: z.number(),
    sampleRate: z.number(),
  }),
  /** Directions waves can come from, degrees true clockwise from first to second; null: all round. */
  openSeaSector: z.tuple([z.number(), z.number()]).nullable(),
})
export type DesignQuestion = z.infer<typeof designQuestion>

export const designFinding = z.object({
  /** Stable, names the check: `falsePeak`, `survey`, `moved:OL-3`. */
  check: z.string(),
  quality: z.enum(['good', 'suspect', 'fail']),
  /** One sentence for people. */
  sentence: z.string(),
  value: z.number().nullable(),
  limit: z.number().nullable(),
  unit: z.string(),
})
export type DesignFinding = z.infer<typeof designFinding>

const falsePeak = z.object({
  /** s */
  period: z.number(),
  from: z.number(),
  /** Where it would read. */
  readsFrom: z.number(),
  /** Of the true peak's power, 0 to 1. */
  power: z.number(),
})

const errorCurve = z.object({
  /** Null: all sensors; otherwise the letter of the one that is left out. */
  without: z.string().nullable(),
  /** One standard deviation by direction, as `directions`; null where it cannot be determined. */
  headingSd: z.array(z.number().nullable()),
  /** Share of the speed. */
  speedSd: z.array(z.number().nullable()),
  /** Why the curve is empty. */
  reason: z.string().nullable(),
})

export const designCheck = z.object({
  question: designQuestion,
  /** Null where no peak beside the true one can be told apart. */
  worstFalsePeak: falsePeak.nullable(),
  /** From this period up no direction is mistaken for another, s; null where none in the range is free. */
  aliasFreePeriod: z.number().nullable(),
  /** Where half a wave length is the shortest baseline, s. */
  halfWavePeriod: z.number().nullable(),
  /** Longest and shortest distance between two sensors, m. */
  longestBaseline: z.number(),
  shortestBaseline: z.number(),
  /** Extent along and across the worst direction for heading, m. */
  worstFrom: z.number().nullable(),
  apertureAlong: z.number().nullable(),
  apertureAcross: z.number().nullable(),
  /** A single sensor's clock may be off by this before it turns a heading by half a degree, s. */
  clockSkewAllowed: z.number().nullable(),
  /** What survey and clocks add to a heading at the most, degrees. */
  systematicHeading: z.number().nullable(),
  /** Degrees true the waves come from. */
  directions: z.array(z.number()),
  curves: z.array(errorCurve),
  findings: z.array(designFinding),
})
export type DesignCheck = z.infer<typeof designCheck>

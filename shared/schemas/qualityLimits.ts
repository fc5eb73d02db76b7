/** Thresholds of the QARTOD tests as a version of a station's settings holds them; field by field as `shared/waves/qualityLimits` has them. */
import { z } from 'zod'

const span = z.tuple([z.number(), z.number()]).refine(([from, to]) => to > from, 'the second must be above the first')
const share = z.number().min(0).max(1)

export const qualityLimits = z.strictObject({
  instrumentSpan: span.nullable(),
  depthSpan: span.nullable(),
  segmentShift: z.number().positive(),
  acceleration: z.number().positive().max(5),
  suspectDeviation: z.number().min(0),
  failDeviation: z.number().min(0),
  suspectCompleteness: share,
  neighbourLevel: z.number().positive(),
  neighbourHeight: z.number().positive(),
  greatestHeightShare: z.number().positive(),
  periodSpan: span,
  spreadSpan: span,
  lowFrequencyShare: share,
  tailShare: z.number().positive(),
  heightChange: z.number().positive(),
  heightChangeShare: z.number().min(0),
  periodChange: z.number().positive(),
  headingChange: z.number().positive().max(180),
  recordDeviations: z.number().min(1),
  suspectRepeats: z.number().int().min(2),
  failRepeats: z.number().int().min(3),
})

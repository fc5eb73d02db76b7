/**
 * Does the heading of a fitted train turn with frequency? Two seas that cannot be told apart (headings or periods too near for the
 * array and the record) are fitted as one train between them; what is left then turns with frequency, from the heading of the longer
 * sea to that of the shorter. Score test (Rao 1948) of a slope of heading over ln f, its centre chosen so that it leaves the
 * heading itself alone.
 */
import { directionAt, parameterCount, parametersPerSystem } from './seaModel.ts'
import type { SeaFit } from './seaFit.ts'

export interface HeadingTurn {
  /** rad per unit of ln f, positive to the left. */
  slope: number
  /** |slope| over its standard deviation under the model. */
  significance: number
  /** How far the heading turns over the frequencies that tell it: two standard deviations of slope · ln f, rad; at most 20°. */
  range: number
}

/** Turns below so many standard deviations or so many radians are none: 1 of 240 single trains reached three. */
const leastSignificance = 3
const leastRange = 0.05
/** A straight line through two seas says no more than this of either: beyond it the vector is doubted, not withdrawn. */
const greatestRange = 0.35

/** Null where the record says nothing of it, or where the heading does not turn. */
export function headingTurn(fit: SeaFit, system: number): HeadingTurn | null {
  const { bands } = fit.model
  const { groupGradient, groupInformation } = fit.evaluation
  const count = parameterCount(fit.model)
  const at = system * parametersPerSystem + directionAt
  let information = 0
  let moment = 0
  for (let g = 0; g < bands.groups; g++) {
    const own = Math.max(0, groupInformation[g * count + at])
    information += own
    moment += own * Math.log(bands.frequency[g])
  }
  if (!(information > 0)) return null
  const centre = moment / information
  let score = 0
  let square = 0
  for (let g = 0; g < bands.groups; g++) {
    const off = Math.log(bands.frequency[g]) - centre
    score += off * groupGradient[g * count + at]
    square += off * off * Math.max(0, groupInformation[g * count + at])
  }
  if (!(square > 0)) return null
  const slope = score / square
  const turn = {
    slope,
    significance: Math.abs(score) / Math.sqrt(square),
    range: Math.min(greatestRange, 2 * Math.abs(slope) * Math.sqrt(square / information)),
  }
  return turn.significance > leastSignificance && turn.range > leastRange ? turn : null
}

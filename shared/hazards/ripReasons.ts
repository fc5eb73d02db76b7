/**
 * Reasons for a rip caution, each present, absent or not known, with its value. Lifeguards' logs found rips with height, with waves close
 * to square on and narrow in direction (Dusek & Seim 2013, J. Coastal Res. 29(3)), and near low water (Moulton et al. 2017, Weather and
 * Forecasting 32(4)); the period had no part. Reasons are never added up to a grade: rips occur with none of them, and short-lived ones
 * go with a wide spread.
 */
import type { FigureUnit } from './figure.ts'
import type { Uncertain } from './uncertain.ts'

export type RipReasonKey = 'height' | 'incidence' | 'spread' | 'tide'

export interface RipReason {
  key: RipReasonKey
  state: 'present' | 'absent' | 'not known'
  /** Height m; angle off square and spread rad; time to the nearest low water s, negative after it. */
  value: number | null
  unit: FigureUnit
  sd: number | null
  /** From the settings, same unit. */
  threshold: number
  /** The reason counts at or above the threshold, or at or below it. */
  counts: 'from' | 'up to'
  /** Within one standard deviation of the threshold: it could as well be the other. */
  isNear: boolean
  /** Why it is not known; null otherwise. */
  reason: string | null
  source: string
  fromMemory: boolean
}

/** Settings of the place. */
export interface RipThresholds {
  /** m */
  height: number
  /** rad off square at the break */
  incidence: number
  /** rad, √(2(1−m₁)) */
  spread: number
  /** s before and after low water */
  lowWater: number
}

export interface RipQuestion {
  /** Significant height where it is measured, m. */
  height: Uncertain | null
  /** Angle against the onshore normal at the break, rad, either sign. */
  incidence: Uncertain | null
  /** Of the leading system, rad; ± is taken as 20 %. */
  spread: number | null
  /** s to the nearest low water, negative after it; null where the tide is not known. */
  toLowWater: number | null
}

export const ripCaution = 'Rips also occur with none of these.'

const dusekSeim = 'lifeguards’ logs, Dusek & Seim 2013'
const moulton = 'observations and model, Moulton et al. 2017'
const spreadSdShare = 0.2

/** In the order of the page: height, incidence, spread, tide. */
export function ripReasons(question: RipQuestion, thresholds: RipThresholds): RipReason[] {
  const { height, incidence, spread, toLowWater } = question
  return [
    judge('height', 'm', thresholds.height, 'from', height, 'no height is known', dusekSeim),
    judge(
      ...(['incidence', 'rad', thresholds.incidence, 'up to'] as const),
      incidence && { value: Math.abs(incidence.value), sd: incidence.sd },
      'the direction at the break is not known',
      `${dusekSeim}; ${moulton}`,
    ),
    judge(
      ...(['spread', 'rad', thresholds.spread, 'up to'] as const),
      spread === null ? null : { value: spread, sd: spreadSdShare * spread },
      'the array cannot tell the spread',
      dusekSeim,
    ),
    judge(
      ...(['tide', 's', thresholds.lowWater, 'up to'] as const),
      toLowWater === null ? null : { value: toLowWater, sd: 0 },
      'the time of low water is not known',
      moulton,
    ),
  ]
}

function judge(
  key: RipReasonKey,
  unit: FigureUnit,
  threshold: number,
  counts: RipReason['counts'],
  given: Uncertain | null,
  unknown: string,
  source: string,
): RipReason {
  const frame = { key, unit, threshold, counts, source, fromMemory: false }
  if (!given) return { ...frame, state: 'not known', value: null, sd: null, isNear: false, reason: unknown }
  const amount = Math.abs(given.value)
  const isPresent = counts === 'from' ? amount >= threshold : amount <= threshold
  return {
    ...frame,
    state: isPresent ? 'present' : 'absent',
    value: given.value,
    sd: given.sd,
    isNear: Math.abs(amount - threshold) < (given.sd ?? 0),
    reason: null,
  }
}

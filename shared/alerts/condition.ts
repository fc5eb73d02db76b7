/** A whole condition asked of one moment: quality, comparisons, rises, hours and season. Pure. */
import type { Comparison, Condition, NotJudgedReason } from '../schemas/limit.ts'
import { joinVerdicts, judgeComparison } from './compare.ts'
import type { Verdict } from './compare.ts'
import { flagOf, nothing } from './figures.ts'
import type { Reading, SeaFigures, Seen } from './figures.ts'
import { flagOfQuantity, quantityOf } from './quantities.ts'
import type { Quantity } from './quantities.ts'
import { isWithin } from './timeSpan.ts'

export interface Moment {
  /** End of the window, or the moment itself for data health; ms since 1970 UTC. */
  at: number
  seen: Seen
  /** Figures of the window that ended so many seconds before; null where there is none. */
  earlier(seconds: number): SeaFigures | null
  /** Of the port, for hours and season. */
  timeZone: string
}

export interface Judgement {
  verdict: Verdict
  /** Of the first comparison's quantity (its rise where it asks for one). */
  value: number | null
  sd: number | null
  notJudged: NotJudgedReason | null
}

function isUsable(quantity: Quantity, sea: SeaFigures | null, condition: Condition): boolean {
  if (quantity.limitClass === 'dataHealth') return true
  if (!sea) return false
  return flagOfQuantity(quantity, sea) <= Math.max(1, condition.worstQuality)
}

function read(quantity: Quantity, comparison: Comparison, condition: Condition, moment: Moment): Reading {
  if (!isUsable(quantity, moment.seen.sea, condition)) return nothing
  const now = quantity.read(moment.seen)
  if (comparison.kind !== 'above' || comparison.riseOverSeconds === null) return now
  const sea = moment.earlier(comparison.riseOverSeconds)
  if (!isUsable(quantity, sea, condition)) return nothing
  const before = quantity.read({ sea, health: null })
  return { value: now.value - before.value, sd: Math.hypot(now.sd, before.sd), atMost: NaN }
}

const orNull = (value: number): number | null => (Number.isNaN(value) ? null : value)

/** What the condition says of this moment. Outside its hours and season it is clear, whatever the sea does. */
export function judgeCondition(condition: Condition, moment: Moment): Judgement {
  let verdict: Verdict = 'raise'
  let first: Reading = nothing
  for (const [index, comparison] of condition.comparisons.entries()) {
    const quantity = quantityOf(comparison.quantity)
    const reading = read(quantity, comparison, condition, moment)
    if (index === 0) first = reading
    const { value, sd, atMost } = reading
    verdict = joinVerdicts(verdict, judgeComparison(comparison, value, sd, atMost, condition.clearSigmas))
  }
  if (!isWithin(condition.when, moment.at, moment.timeZone)) verdict = 'clear'
  const { sea } = moment.seen
  const isFailed =
    quantityOf(condition.comparisons[0].quantity).limitClass === 'wave' && (!sea || flagOf(sea, false) > 3)
  const reason = isFailed ? 'failed' : 'noValue'
  return { verdict, value: orNull(first.value), sd: orNull(first.sd), notJudged: verdict === 'unknown' ? reason : null }
}

/** The rises that a condition asks for, seconds: how far back its judge must read. */
export const risesOf = (condition: Condition): number[] =>
  condition.comparisons.flatMap((one) => (one.kind === 'above' && one.riseOverSeconds ? [one.riseOverSeconds] : []))

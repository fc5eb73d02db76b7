/** Is a beach patrolled at a moment, and when does that change next? Hours and seasons in the port's zone. Pure. */
import { spanChecker } from '../../../shared/alerts/timeSpan.ts'
import type { TimeSpan } from '../../../shared/schemas/limit.ts'
import { clockLocal } from '../../../shared/times.ts'

export interface Duty {
  isOn: boolean
  /** `17:00`, local, with the day where it is not within a day; null: not within a week, or never. */
  changesAt: string | null
}

const minuteMs = 60_000
/** Spans begin and end at whole minutes, as a rule at whole quarters. */
const stepMs = 5 * minuteMs
const weekMs = 7 * 24 * 60 * minuteMs

export function dutyAt(patrol: readonly TimeSpan[], at: number, timeZone: string): Duty {
  const checkers = patrol.map((span) => spanChecker(span, timeZone))
  const holds = (moment: number): boolean => checkers.some((within) => within(moment))
  const isOn = holds(at)
  if (checkers.length === 0) return { isOn, changesAt: null }
  for (let moment = (Math.floor(at / stepMs) + 1) * stepMs; moment < at + weekMs; moment += stepMs) {
    if (holds(moment) === isOn) continue
    // The first minute of the change lies within the last step.
    let first = moment
    while (first - minuteMs > at && holds(first - minuteMs) !== isOn) first -= minuteMs
    const day = first - at > 20 * 60 * minuteMs ? `${weekday(first, timeZone)} ` : ''
    return { isOn, changesAt: `${day}${clockLocal(first, timeZone)}` }
  }
  return { isOn, changesAt: null }
}

const weekday = (ms: number, timeZone: string): string =>
  new Intl.DateTimeFormat('en-GB', { timeZone, weekday: 'short' }).format(ms)

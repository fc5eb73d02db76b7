/** Hours and seasons in the port's zone, asked of any moment. */
import { DateTime } from 'luxon'
import type { TimeSpan } from '../schemas/limit.ts'

const minuteMs = 60_000
const dayMs = 86_400_000
/** No zone has changed its offset off a quarter of an hour of UTC since 1972. */
const quarterMs = 15 * minuteMs

const minutesOf = (clock: string): number => Number(clock.slice(0, 2)) * 60 + Number(clock.slice(3))

/** Days of a year as numbers that compare: 5 Feb is 205. */
const dayNumber = (monthDay: string): number => Number(monthDay.slice(0, 2)) * 100 + Number(monthDay.slice(3))

function inHours({ from, to, days }: NonNullable<TimeSpan['hours']>, minute: number, weekday: number): boolean {
  const [first, last] = [minutesOf(from), minutesOf(to)]
  const holds = (day: number): boolean => days.includes(day)
  if (first < last) return minute >= first && minute < last && holds(weekday)
  // Over midnight, or round the clock where both are the same: what is after midnight belongs to the day before.
  if (minute >= first) return holds(weekday)
  return minute < last && holds(weekday === 1 ? 7 : weekday - 1)
}

const inSeason = ({ from, to }: NonNullable<TimeSpan['season']>, day: number): boolean =>
  dayNumber(from) <= dayNumber(to)
    ? day >= dayNumber(from) && day <= dayNumber(to)
    : day >= dayNumber(from) || day <= dayNumber(to)

/**
 * Answers for moments (ms since 1970 UTC) whether they lie in the span. By the local clock: in the doubled hour of
 * autumn a span holds twice, and one that begins in the missing hour of spring begins at the next minute there is.
 * Throws RangeError on a zone that does not exist.
 */
export function spanChecker(span: TimeSpan | null, timeZone: string): (at: number) => boolean {
  if (span === null || (span.hours === null && span.season === null)) return () => true
  const offsets = new Map<number, number>()
  if (!DateTime.fromMillis(0, { zone: timeZone }).isValid) throw new RangeError(`no time zone ${timeZone}`)
  function offsetAt(at: number): number {
    const quarter = Math.floor(at / quarterMs)
    let offset = offsets.get(quarter)
    if (offset === undefined) {
      offset = DateTime.fromMillis(quarter * quarterMs, { zone: timeZone }).offset * minuteMs
      offsets.set(quarter, offset)
    }
    return offset
  }
  const { hours, season } = span
  return (at) => {
    const local = at + offsetAt(at)
    const dayStart = Math.floor(local / dayMs)
    // 1 January 1970 was a Thursday.
    const weekday = ((((dayStart + 3) % 7) + 7) % 7) + 1
    if (hours && !inHours(hours, (local - dayStart * dayMs) / minuteMs, weekday)) return false
    if (!season) return true
    const date = new Date(local)
    return inSeason(season, (date.getUTCMonth() + 1) * 100 + date.getUTCDate())
  }
}

/** Is this moment (ms since 1970 UTC) in the span? Null: always. */
export const isWithin = (span: TimeSpan | null, at: number, timeZone: string): boolean =>
  spanChecker(span, timeZone)(at)

/** Moments that come once a day by the clock on the wall of a zone. */
import { DateTime } from 'luxon'

function momentOn(day: DateTime, hour: number, minute: number): number {
  const moment = day.set({ hour, minute, second: 0, millisecond: 0 })
  // In the missing hour of spring the day's moment is the next minute that exists.
  if (moment.hour === hour && moment.minute === minute) return moment.toMillis()
  return moment.startOf('hour').toMillis()
}

/**
 * The newest moment at `clock` (`06:30`) in an IANA zone that is not after `now` (ms since 1970 UTC). In the doubled
 * hour of autumn it is the first of the two. Throws RangeError on a zone that does not exist.
 */
export function latestDailyMoment(clock: string, timeZone: string, now: number): number {
  const today = DateTime.fromMillis(now, { zone: timeZone }).startOf('day')
  if (!today.isValid) throw new RangeError(`no time zone ${timeZone}`)
  const [hour, minute] = clock.split(':').map(Number)
  const moment = momentOn(today, hour, minute)
  return moment <= now ? moment : momentOn(today.minus({ days: 1 }), hour, minute)
}

/** Which watch of the office's rota it is, by the port's clock. */
import { DateTime } from 'luxon'
import { latestDailyMoment } from '../dailyMoment.ts'
import type { RotaWatch } from '../schemas/watch.ts'

interface Placed {
  watch: RotaWatch
  startedAt: number
}

/** The newest to have begun. Null without a rota. `now`: ms since 1970 UTC; throws RangeError on a zone that does not exist. */
export function currentRotaWatch(rota: readonly RotaWatch[], timeZone: string, now: number): Placed | null {
  const begun = rota.map((watch) => ({ watch, startedAt: latestDailyMoment(watch.from, timeZone, now) }))
  return begun.reduce<Placed | null>(
    (best, one) => (best === null || one.startedAt > best.startedAt ? one : best),
    null,
  )
}

/** The first to begin after `now`. */
export function nextRotaWatch(
  rota: readonly RotaWatch[],
  timeZone: string,
  now: number,
): { name: string; startsAt: number } | null {
  const coming = rota.map(({ name, from }) => ({ name, startsAt: nextDailyMoment(from, timeZone, now) }))
  return coming.reduce<(typeof coming)[number] | null>(
    (best, one) => (best === null || one.startsAt < best.startsAt ? one : best),
    null,
  )
}

/** Tomorrow's moment is asked for at noon of the next day, so that no change of the clock skips one. */
function nextDailyMoment(clock: string, timeZone: string, now: number): number {
  const endOf = (days: number): number =>
    DateTime.fromMillis(now, { zone: timeZone }).startOf('day').plus({ days }).minus({ milliseconds: 1 }).toMillis()
  const today = latestDailyMoment(clock, timeZone, endOf(1))
  return today > now ? today : latestDailyMoment(clock, timeZone, endOf(2))
}

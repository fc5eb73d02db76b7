/** How moments are written: UTC first, the date in words. Arguments are milliseconds since 1970 UTC. */
const weekdays = ['Sun', 'Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat']
const months = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec']
const twoDigits = (value: number): string => String(value).padStart(2, '0')

/** `14:32`, UTC. */
export function clockUtc(ms: number): string {
  const moment = new Date(ms)
  return `${twoDigits(moment.getUTCHours())}:${twoDigits(moment.getUTCMinutes())}`
}

/** `14:32:07`, UTC. */
export const clockUtcSeconds = (ms: number): string => `${clockUtc(ms)}:${twoDigits(new Date(ms).getUTCSeconds())}`

/** `Thu 12 Nov 2026`, UTC. */
export function dateUtc(ms: number): string {
  const moment = new Date(ms)
  return `${weekdays[moment.getUTCDay()]} ${moment.getUTCDate()} ${months[moment.getUTCMonth()]} ${moment.getUTCFullYear()}`
}

/** The clock alone while `ms` is less than 20 h before `nowMs`, else with its day: `14:10`, `Tue 10 Nov 2026 14:10`. */
export const momentUtc = (ms: number, nowMs: number): string =>
  Math.abs(nowMs - ms) < 20 * 3_600_000 ? clockUtc(ms) : `${dateUtc(ms)} ${clockUtc(ms)}`

/** `15:32` in an IANA zone. Throws RangeError on a zone that does not exist. */
export const clockLocal = (ms: number, timeZone: string): string =>
  new Intl.DateTimeFormat('en-GB', { timeZone, hour: '2-digit', minute: '2-digit', hourCycle: 'h23' }).format(ms)

/** Times as loggers write them, to milliseconds since 1970 UTC. */
import type { UploadLayout } from '../schemas/stationSetUpUploads.ts'

const yearFirst = /^(\d{4})[-/.](\d{1,2})[-/.](\d{1,2})(?:[T ]+(\d{1,2}):(\d\d)(?::(\d\d)(?:[.,](\d{1,9}))?)?)?\s*(Z|UTC|[+-]\d\d:?\d\d)?$/ // prettier-ignore
const dayFirst = /^(\d{1,2})\.(\d{1,2})\.(\d{4})(?:[T ]+(\d{1,2}):(\d\d)(?::(\d\d)(?:[.,](\d{1,9}))?)?)?\s*(Z|UTC|[+-]\d\d:?\d\d)?$/ // prettier-ignore
const epoch = /^\d{9,16}(?:[.,]\d+)?$/

/**
 * `text` holds date and clock time. Without a zone it is that of `utcOffsetMinutes`. NaN for what is no time: months in
 * words, two-figure years, and dates with slashes that begin with the day or the month, of which nobody can tell which.
 */
export function readTime(
  text: string,
  { timeForm, utcOffsetMinutes }: Pick<UploadLayout, 'timeForm' | 'utcOffsetMinutes'>,
): number {
  const plain = text.trim()
  if (timeForm !== 'iso') {
    if (!epoch.test(plain)) return NaN
    return Number(plain.replace(',', '.')) * (timeForm === 'epochSeconds' ? 1000 : 1)
  }
  const first = yearFirst.exec(plain)
  const last = first ? null : dayFirst.exec(plain)
  const match = first ?? last
  if (!match) return NaN
  const [year, day] = first ? [match[1], match[3]] : [match[3], match[1]]
  const [, , month, , hour = '0', minute = '0', second = '0', fraction = '', zone] = match
  const [y, mo, d, h, mi, s] = [year, month, day, hour, minute, second].map(Number)
  if (mo < 1 || mo > 12 || d < 1 || d > 31 || h > 23 || mi > 59 || s > 59) return NaN
  const base = Date.UTC(y, mo - 1, d, h, mi, s)
  if (new Date(base).getUTCDate() !== d) return NaN
  return base + (fraction ? Number(`0.${fraction}`) * 1000 : 0) - offsetOf(zone, utcOffsetMinutes) * 60_000
}

function offsetOf(zone: string | undefined, usual: number): number {
  if (zone === undefined) return usual
  const [, sign, hours, minutes] = /^([+-])(\d\d):?(\d\d)$/.exec(zone) ?? []
  return sign === undefined ? 0 : (sign === '-' ? -1 : 1) * (Number(hours) * 60 + Number(minutes))
}

/**
 * How well the alerts serve the people who must act on them: the measures of ANSI/ISA-18.2-2016 (clause on monitoring
 * and assessment) for one operator position, against their targets. Pure; times are ms since 1970 UTC.
 */
import type { AlertPerformance } from '../schemas/alert.ts'
import type { Priority } from '../schemas/limit.ts'
import { floodBegins, floodEnds, floodSpanMs } from './order.ts'

export interface CountedAlert {
  id: number
  limitId: number
  title: string
  priority: Priority
  /** People were told. */
  announcedAt: number
  acknowledgedAt: number | null
  clearedAt: number | null
  closedAt: number | null
}

type Measure = AlertPerformance['measures'][number]

const minuteMs = 60_000
const hourMs = 60 * minuteMs
const dayMs = 24 * hourMs
/** Waves change over hours: three times in six hours is chatter here, where a plant counts three in a minute. */
const chatterSpanMs = 6 * hourMs
const chatterCount = 3
const priorityTargets: Record<Priority, number> = { low: 0.8, medium: 0.15, high: 0.04, urgent: 0.01 }

function verdictOf(value: number | null, target: number, most: number): Measure['verdict'] {
  if (value === null) return 'notDetermined'
  if (value <= target) return 'met'
  return value <= most ? 'near' : 'missed'
}

interface Rated {
  key: string
  name: string
  value: number | null
  unit: string
  target: number
  most: number
  detail: string
}
const measure = (rated: Rated): Measure => ({ ...rated, verdict: verdictOf(rated.value, rated.target, rated.most) })

/** Counts in every span of so long, from the beginning; a last, unfinished one is left out. */
function countsBySpan(times: number[], from: number, to: number, spanMs: number): number[] {
  const counts = new Array<number>(Math.floor((to - from) / spanMs)).fill(0)
  for (const time of times) {
    const index = Math.floor((time - from) / spanMs)
    if (index >= 0 && index < counts.length) counts[index] += 1
  }
  return counts
}

/** Time within floods: from the eleventh within ten minutes until fewer than five were. `times` rise. */
export function floodMs(times: number[], to: number): number {
  let spent = 0
  let since: number | null = null
  const edges = [...new Set(times.flatMap((time) => [time, time + floodSpanMs + 1]))].sort((a, b) => a - b)
  for (const at of edges) {
    if (at > to) break
    const count = times.filter((time) => time <= at && time > at - floodSpanMs).length
    if (since === null && count > floodBegins) since = at
    if (since !== null && count < floodEnds) {
      spent += at - since
      since = null
    }
  }
  return since === null ? spent : spent + (to - since)
}

/** The first moment at which a limit's third announcement within six hours came, and how often that happened. */
function chatter(times: number[]): { count: number; at: number } | null {
  let count = 0
  let first: number | null = null
  for (let n = chatterCount - 1; n < times.length; n += 1) {
    if (times[n] - times[n - chatterCount + 1] > chatterSpanMs) continue
    count += 1
    first ??= times[n]
  }
  return first === null ? null : { count, at: first }
}

const shareOf = (counts: number[], above: number): number | null =>
  counts.length === 0 ? null : counts.filter((count) => count > above).length / counts.length

function quantile(values: number[], share: number): number | null {
  if (values.length === 0) return null
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.ceil(share * sorted.length) - 1)]
}

/** Exercises are not among `alerts`. */
export function performanceOf(alerts: CountedAlert[], from: number, to: number): AlertPerformance {
  const told = alerts.filter(({ announcedAt }) => announcedAt >= from && announcedAt < to)
  const times = told.map(({ announcedAt }) => announcedAt).sort((a, b) => a - b)
  const days = (to - from) / dayMs
  const hours = countsBySpan(times, from, to, hourMs)
  const tenMinutes = countsBySpan(times, from, to, 10 * minuteMs)
  const byLimit = new Map<number, CountedAlert[]>()
  for (const alert of told) byLimit.set(alert.limitId, [...(byLimit.get(alert.limitId) ?? []), alert])
  const offenders = [...byLimit.values()]
    .map((own) => ({
      limitId: own[0].limitId,
      title: own[0].title,
      count: own.length,
      share: own.length / told.length,
    }))
    .sort((a, b) => b.count - a.count || a.limitId - b.limitId)
  const stale = alerts
    .filter(({ announcedAt, clearedAt, closedAt }) => (clearedAt ?? closedAt ?? to) - announcedAt > dayMs)
    .map(({ id, title, announcedAt }) => ({ alertId: id, title, since: new Date(announcedAt).toISOString() }))
  const chattering = [...byLimit.values()].flatMap((own) => {
    const found = chatter(own.map(({ announcedAt }) => announcedAt).sort((a, b) => a - b))
    const [{ limitId, title }] = own
    return found ? [{ limitId, title, count: found.count, at: new Date(found.at).toISOString() }] : []
  })
  const waits = told.flatMap(({ announcedAt, acknowledgedAt }) => (acknowledgedAt === null ? [] : [(acknowledgedAt - announcedAt) / 1000])) // prettier-ignore
  const median = quantile(waits, 0.5)
  const topTen = offenders.slice(0, 10).reduce((sum, { count }) => sum + count, 0)
  const perDay = days > 0 ? told.length / days : null
  return {
    from: new Date(from).toISOString(),
    to: new Date(to).toISOString(),
    days,
    isLongEnough: days >= 30,
    measures: [
      measure({ key: 'perDay', name: 'Alerts a day', value: perDay, unit: '', target: 150, most: 300, detail: 'A harbour desk should lie far below: a few a day.' }),
      measure({ key: 'perHour', name: 'Alerts an hour, mean', value: perDay === null ? null : perDay / 24, unit: '', target: 6, most: 12, detail: '' }),
      measure({ key: 'perTenMinutes', name: 'Alerts in 10 min, mean', value: perDay === null ? null : perDay / 144, unit: '', target: 1, most: 2, detail: '' }),
      measure({ key: 'busyHours', name: 'Hours with more than 30', value: shareOf(hours, 30), unit: 'share', target: 0.01, most: 0.01, detail: '' }),
      measure({ key: 'busyTenMinutes', name: '10 min periods with more than 10', value: shareOf(tenMinutes, 10), unit: 'share', target: 0.01, most: 0.01, detail: `Most in 10 min: ${Math.max(0, ...tenMinutes)}.` }),
      measure({ key: 'flood', name: 'Time in flood', value: to > from ? floodMs(times, to) / (to - from) : null, unit: 'share', target: 0.01, most: 0.01, detail: 'From more than 10 in 10 min until fewer than 5.' }),
      measure({ key: 'topTen', name: 'Share of the ten most frequent', value: told.length === 0 ? null : topTen / told.length, unit: 'share', target: 0.01, most: 0.05, detail: 'With few limits it is high by nature; each needs a plan.' }),
      measure({ key: 'stale', name: 'Active for more than 24 h', value: stale.length, unit: '', target: 4, most: 4, detail: 'Fewer than 5 on any day.' }),
      measure({ key: 'chattering', name: 'Limits that chatter', value: chattering.length, unit: '', target: 0, most: 0, detail: 'Three announcements within six hours, as waves go.' }),
      measure({ key: 'acknowledge', name: 'Time to acknowledge, median', value: median, unit: 's', target: 600, most: 1800, detail: `${told.length - waits.length} of ${told.length} not acknowledged. The office's own aim; the standard sets none.` }),
    ], // prettier-ignore
    byPriority: (['urgent', 'high', 'medium', 'low'] as const).map((priority) => {
      const count = told.filter((alert) => alert.priority === priority).length
      const share = told.length === 0 ? null : count / told.length
      return { priority, count, share, target: priorityTargets[priority] }
    }),
    byDay: byDay(times, from, to),
    topOffenders: offenders.slice(0, 10),
    stale,
    chattering,
  }
}

/** UTC days that the span touches. */
function byDay(times: number[], from: number, to: number): AlertPerformance['byDay'] {
  const days: AlertPerformance['byDay'] = []
  for (let start = Math.floor(from / dayMs) * dayMs; start < to; start += dayMs) {
    const count = times.filter((time) => time >= start && time < start + dayMs).length
    days.push({ day: new Date(start).toISOString().slice(0, 10), count })
  }
  return days
}

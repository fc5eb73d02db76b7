/** Alerts in the words of the page. Pure; directions carry their sense, values their unit and ±. */
import { valueWithSd, valueWords } from '../../../shared/alerts/describe.ts'
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import type { AlertBoard, AlertView } from '../../../shared/schemas/alert.ts'
import type { LimitView, NotJudgedReason, Priority } from '../../../shared/schemas/limit.ts'
import { dateUtc, momentUtc } from '../../../shared/times.ts'
import { plusMinus } from '../../../shared/units.ts'
import type { AlertRow, AlertTally } from '../../stores/alertOrder.ts'
import { alsoIn } from '../../figures/shown.ts'

export const priorityNames: Record<Priority, string> = { low: 'Low', medium: 'Medium', high: 'High', urgent: 'Urgent' }

/** Four digits, so that it is read as a number of an alert. */
export const alertNumber = (id: number): string => String(id).padStart(4, '0')

export const priorityName = ({ priority, alert }: Pick<AlertRow, 'priority' | 'alert'>): string =>
  alert?.isExercise ? `EXERCISE, ${priorityNames[priority].toLowerCase()}` : priorityNames[priority]

export const valueOf = (alert: AlertView): string => valueWords(quantityOf(alert.quantity), alert.value)
export const valueAndSd = (alert: AlertView): string =>
  valueWithSd(quantityOf(alert.quantity), alert.value, alert.valueSd)

/** `± 0.09`; empty where there is none. */
export function sdOf(alert: AlertView): string {
  const quantity = quantityOf(alert.quantity)
  if (alert.value === null || alert.valueSd === null || quantity.limitClass === 'dataHealth') return ''
  return `${plusMinus(alert.valueSd * quantity.toUnit, quantity.decimals)}${quantity.isCircular ? '°' : ''}`
}

/** `limit 1.00 m`; `limit: a sector` for bearings. */
export function limitOf(alert: AlertView): string {
  if (alert.raise === null) return 'limit: a sector'
  if (alert.quantity === 'arrayDisagreement') return ''
  const quantity = quantityOf(alert.quantity)
  return `limit ${valueWords(quantity, alert.raise)}${alsoIn(quantity.unit, alert.raise)}`
}

/** `Cross-sea, Marrowick Entrance` without the place. */
export const quantityTitle = (alert: AlertView): string => alert.title.replace(`, ${alert.subject.name}`, '')

const clock = (iso: string, nowMs: number): string => momentUtc(Date.parse(iso), nowMs)

function shelfWords(shelf: LimitView['shelf'], nowMs: number): string {
  if (!shelf) return 'shelved'
  return `shelved until ${clock(shelf.endsAt, nowMs)}${shelf.by ? ` by ${shelf.by.name}` : ''}`
}

/** `Active, acknowledged by B-2 14:27`. */
export function alertStateWords(alert: AlertView, nowMs: number): string {
  const by = alert.acknowledgedBy ? ` by ${alert.acknowledgedBy.name}` : ''
  const at = alert.acknowledgedAt ? ` ${clock(alert.acknowledgedAt, nowMs)}` : ''
  const cleared = alert.clearedAt ? `Cleared ${clock(alert.clearedAt, nowMs)}` : 'Cleared'
  switch (alert.state) {
    case 'unacknowledgedActive':
      return 'Active, not acknowledged'
    case 'acknowledgedActive':
      return `Active, acknowledged${by}${at}`
    case 'returnedUnacknowledged':
      return `${cleared}, not acknowledged`
    case 'latchedUnacknowledged':
      return `${cleared}, latched, not acknowledged`
    case 'latchedAcknowledged':
      return `${cleared}, latched, acknowledged${by}${at}`
    case 'shelved':
      return `${alert.clearedAt ? cleared : 'Exceeded'}, ${shelfWords(alert.shelf, nowMs)}`
    case 'suppressed':
      return `${alert.clearedAt ? cleared : 'Exceeded'}, suppressed by design`
    case 'outOfService':
      return `Out of service${alert.outOfServiceSince ? ` since ${clock(alert.outOfServiceSince, nowMs)}` : ''}`
    case 'normal':
      return `Over${alert.closedAt ? ` since ${clock(alert.closedAt, nowMs)}` : ''}`
  }
}

function limitStateWords(limit: LimitView, nowMs: number): string {
  if (limit.outOfService) {
    const since = momentUtc(Date.parse(limit.outOfService.since), nowMs)
    return `Out of service since ${since}: ${limit.outOfService.reason}`
  }
  const exceeded = limit.isActive ? 'Exceeded, ' : 'Not exceeded, '
  if (limit.state === 'shelved') return `${exceeded}${shelfWords(limit.shelf, nowMs)}`
  return `${exceeded}suppressed by design`
}

export const rowTitle = ({ alert, limit }: AlertRow): string => alert?.title ?? limit?.title ?? ''
export const rowState = ({ alert, limit }: AlertRow, nowMs: number): string => {
  const held = alert?.isHeld ? '. Figures stopped: held at its last value' : ''
  return (alert ? alertStateWords(alert, nowMs) : limit ? limitStateWords(limit, nowMs) : '') + held
}

/** `1.11 m`, and below it `± 0.09, limit 1.00 m`. A limit put aside is followed, not judged. */
export function rowFigure({ alert, limit }: AlertRow): { value: string; under: string } {
  if (alert) return { value: valueOf(alert), under: [sdOf(alert), limitOf(alert)].filter(Boolean).join(', ') }
  if (!limit) return { value: '', under: '' }
  const [first] = limit.current.content.condition.comparisons
  const quantity = quantityOf(first.quantity)
  const isJudged = limit.outOfService === null && limit.value !== null
  return {
    value: isJudged ? valueWords(quantity, limit.value) : 'not judged',
    under:
      first.kind === 'sector'
        ? 'limit: a sector'
        : first.quantity === 'arrayDisagreement'
          ? ''
          : `limit ${valueWords(quantity, first.raise)}${alsoIn(quantity.unit, first.raise)}`,
  }
}

/** The time that stands at the end of the row: raised, or put aside. */
export const rowTime = (row: AlertRow, nowMs: number): string =>
  Math.abs(nowMs - row.at) < 20 * 3_600_000
    ? momentUtc(row.at, nowMs)
    : dateUtc(row.at).split(' ').slice(1, 3).join(' ')

/** `3, 1 new`. */
export const badgeWords = ({ active, fresh }: AlertTally): string => `${active}, ${fresh} new`

/** `3 active, 1 new. 1 cleared, not acknowledged. 1 shelved`. */
export function countWords(counts: AlertTally, clearedUnacknowledged: number): string {
  return [
    counts.active > 0 ? `${counts.active} active, ${counts.fresh} new` : 'None active',
    clearedUnacknowledged > 0 && `${clearedUnacknowledged} cleared, not acknowledged`,
    counts.shelved > 0 && `${counts.shelved} shelved`,
    counts.suppressed > 0 && `${counts.suppressed} suppressed by design`,
    counts.outOfService > 0 && `${counts.outOfService} out of service`,
  ]
    .filter(Boolean)
    .join('. ')
}

/** `30 open: 2 urgent, 9 high, 12 medium, 7 low`. */
export function floodWords({ byPriority }: AlertTally): string {
  const names: Priority[] = ['urgent', 'high', 'medium', 'low']
  const total = names.reduce((sum, name) => sum + byPriority[name], 0)
  const parts = names.filter((name) => byPriority[name] > 0).map((name) => `${byPriority[name]} ${name}`)
  return `${total} open: ${parts.join(', ')}`
}

const notJudgedWords: Record<NotJudgedReason, string> = {
  stale: 'stale',
  failed: 'figures failed',
  noValue: 'no figure',
  settling: 'the program has just begun',
  outOfService: 'out of service',
  neverYet: 'never judged yet',
}
const reasonWords = (reason: string): string =>
  reason in notJudgedWords ? notJudgedWords[reason as NotJudgedReason] : reason

/** Never a bare all-clear: `No limit exceeded among 12 judged; 2 not judged: Breakers, Pennow Sands (stale).` */
export function noneExceededWords(
  { judged, notJudged, pending }: Pick<AlertBoard, 'judged' | 'notJudged' | 'pending'>,
  most = 2,
): string {
  if (judged === 0 && notJudged.length === 0) return 'No limit is set, so none can be exceeded.'
  const waiting = pending.map(({ title }) => title)
  const first =
    judged === 0
      ? 'No limit could be judged'
      : waiting.length > 0
        ? `${waiting.length} of ${judged} judged beyond their limit, not yet for their delay: ${firstFew(waiting, most)}`
        : `No limit exceeded among ${judged} judged`
  if (notJudged.length === 0) return `${first}${waiting.length > 0 ? '; ' : ', '}0 not judged.`
  const named = notJudged.map(({ title, reason }) => `${title} (${reasonWords(reason)})`)
  return `${first}; ${notJudged.length} not judged: ${firstFew(named, most)}.`
}

function firstFew(names: readonly string[], most: number): string {
  const rest = names.length - most
  return `${names.slice(0, most).join(', ')}${rest > 0 ? ` and ${rest} more` : ''}`
}

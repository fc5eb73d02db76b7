/** What e-mails and the watch log say of flags, closures and advisories. Pure. */
import type { NoticeContent } from '../schemas/placeNotice.ts'
import { clockLocal, clockUtc, dateUtc } from '../times.ts'

/** `Closure: the walk from the root to the light`, `Flag: Red`, `Advisory: keep off the rocks`. */
export function noticeTitle(content: NoticeContent): string {
  if (content.kind === 'flag') return `Flag: ${content.flag.name}`
  return content.kind === 'closure' ? `Closure: ${content.area}` : `Advisory: ${content.area}`
}

export type NoticeEvent = 'set' | 'extended' | 'withdrawn' | 'expiring' | 'expired'

export interface NoticeFacts {
  event: NoticeEvent
  content: NoticeContent
  placeName: string
  portName: string
  timeZone: string
  isDemonstration: boolean
  /** ms since 1970 UTC. */
  at: number
  startsAt: number
  expiresAt: number | null
  reason: string
  /** Null: the program itself. */
  by: string | null
  caution: string
}

const eventWords: Record<NoticeEvent, string> = {
  set: 'in force',
  extended: 'extended',
  withdrawn: 'withdrawn',
  expiring: 'about to expire',
  expired: 'expired, not withdrawn',
}

const when = (at: number, timeZone: string): string =>
  `${dateUtc(at)}, ${clockUtc(at)} UTC, ${clockLocal(at, timeZone)} local`

/** At most 200 characters. */
export const noticeSubject = ({ event, content, placeName, isDemonstration, startsAt, at }: NoticeFacts): string =>
  `${isDemonstration ? 'DEMONSTRATION ' : ''}${placeName}, ${event === 'set' && startsAt > at ? 'planned' : eventWords[event]}: ${noticeTitle(content)}`.slice(0, 200) // prettier-ignore

/** One line of the watch log. */
export function noticeLine({ event, content, placeName, expiresAt, at, startsAt, reason, by }: NoticeFacts): string {
  const until = expiresAt === null ? '' : `, until ${momentWords(expiresAt, at)} UTC`
  const state = event === 'set' && startsAt > at ? `planned from ${momentWords(startsAt, at)} UTC` : eventWords[event]
  return `${placeName}. ${noticeTitle(content)}, ${state}${event === 'withdrawn' ? '' : until}. ${reason}${by === null ? '' : ` By ${by}.`}`
}

const momentWords = (at: number, now: number): string =>
  Math.abs(at - now) < 20 * 3_600_000 ? clockUtc(at) : `${dateUtc(at)} ${clockUtc(at)}`

export function noticeText(facts: NoticeFacts): string {
  const { event, content, placeName, portName, timeZone, isDemonstration, at, startsAt, expiresAt, reason, by } = facts
  const isPlanned = event === 'set' && startsAt > at
  const lines = [
    isDemonstration && 'Demonstration data, invented coast.',
    `${placeName}, ${portName}. ${noticeTitle(content)}: ${isPlanned ? 'planned' : eventWords[event]}.`,
    content.kind === 'flag' && content.flag.meaning,
    content.kind === 'advisory' && content.text,
    '',
    isPlanned && `From: ${when(startsAt, timeZone)}`,
    expiresAt !== null && event !== 'withdrawn' && `Until: ${when(expiresAt, timeZone)}`,
    expiresAt === null && event !== 'withdrawn' && 'Until it is withdrawn or replaced.',
    `Why: ${reason}`,
    by !== null && `By: ${by}, ${when(at, timeZone)}`,
    event === 'expiring' &&
      'Extend it or withdraw it: it does not end by itself, and afterwards it is shown as expired, not withdrawn.',
    event === 'expired' &&
      'Nobody has withdrawn or extended it. It stands as expired, not withdrawn, until somebody does.',
    event === 'withdrawn' && 'That it is withdrawn does not mean that it is safe.',
    '',
    facts.caution,
  ]
  return lines.filter((line): line is string => typeof line === 'string').join('\n')
}

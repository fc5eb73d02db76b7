/** Flags, closures and advisories in the words of the page. Pure. */
import { noticeTitle } from '../../../shared/notices/words.ts'
import type { NoticeView } from '../../../shared/schemas/placeNotice.ts'
import { clockLocal, momentUtc } from '../../../shared/times.ts'

const stateNames: Record<NoticeView['state'], string> = {
  planned: 'planned',
  inForce: 'in force',
  expired: 'expired, not withdrawn',
  withdrawn: 'withdrawn',
  replaced: 'replaced',
}
const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1)

export const isOpenNotice = ({ state }: NoticeView): boolean =>
  state === 'planned' || state === 'inForce' || state === 'expired'

/** It stands on the place until somebody acts: loud. The clock counts too: one may expire while the page is open. */
export const isExpired = (notice: NoticeView, nowMs: number): boolean =>
  notice.state === 'expired' ||
  (notice.state === 'inForce' && notice.expiresAt !== null && Date.parse(notice.expiresAt) <= nowMs)

export const noticeStateWords = (notice: NoticeView, nowMs: number): string =>
  isExpired(notice, nowMs) ? stateNames.expired : stateNames[notice.state]

/** `Closure: the walk, until 18:00 UTC`. */
export function noticeShort(notice: NoticeView, nowMs: number): { key: number; words: string; isLoud: boolean } {
  const title = capital(noticeTitle(notice.content))
  const state =
    notice.state === 'planned'
      ? `, planned from ${momentUtc(Date.parse(notice.startsAt), nowMs)} UTC`
      : isExpired(notice, nowMs)
        ? ', expired, not withdrawn'
        : notice.expiresAt
          ? `, until ${momentUtc(Date.parse(notice.expiresAt), nowMs)} UTC`
          : ''
  return { key: notice.id, words: `${title}${state}`, isLoud: isExpired(notice, nowMs) }
}

/** `14:06 UTC, 15:06 local`. */
export const momentWords = (iso: string, nowMs: number, timeZone: string): string =>
  `${momentUtc(Date.parse(iso), nowMs)} UTC, ${clockLocal(Date.parse(iso), timeZone)} local`

/** From when until when, by whom and why. */
export function noticeFacts(notice: NoticeView, nowMs: number, timeZone: string): string[] {
  const by = notice.by ? `by ${notice.by.name}` : 'by the program'
  const moment = (iso: string): string => momentWords(iso, nowMs, timeZone)
  const until = notice.expiresAt
    ? `${isExpired(notice, nowMs) ? 'Ran out' : 'Until'} ${moment(notice.expiresAt)}`
    : 'Until another is set or it is withdrawn'
  return [
    `From ${moment(notice.startsAt)}. ${until}.`,
    `Recorded ${moment(notice.createdAt)} ${by}: ${notice.reason}`,
    ...notice.extensions.map(
      ({ at, by: who, expiresAt, reason }) =>
        `Extended ${moment(at)}${who ? ` by ${who.name}` : ''} until ${moment(expiresAt)}: ${reason}`,
    ),
    ...(notice.withdrawnAt
      ? [
          `${notice.state === 'replaced' ? 'Replaced' : 'Withdrawn'} ${moment(notice.withdrawnAt)}${notice.withdrawnBy ? ` by ${notice.withdrawnBy.name}` : ''}${notice.withdrawReason ? `: ${notice.withdrawReason}` : ''}`,
        ]
      : []),
  ]
}

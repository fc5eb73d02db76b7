/** Where a notice stands at a moment. Pure; times in ms since 1970 UTC. */
import type { NoticeView } from '../schemas/placeNotice.ts'

export interface NoticeTimes {
  startsAt: number
  expiresAt: number | null
  withdrawnAt: number | null
  isReplaced: boolean
}

/** One that has run out is `expired` until somebody withdraws or extends it: it never goes by itself. */
export function noticeState(
  { startsAt, expiresAt, withdrawnAt, isReplaced }: NoticeTimes,
  at: number,
): NoticeView['state'] {
  if (withdrawnAt !== null) return isReplaced ? 'replaced' : 'withdrawn'
  if (expiresAt !== null && at >= expiresAt) return 'expired'
  return at < startsAt ? 'planned' : 'inForce'
}

import { notOutForMs } from '../../shared/alerts/notOut.ts'

/** `shared/alerts/notOut` asked of rows of deliveries, named `d`; needs `notOutSince`. */
export const notOutSql = `(d.state IN ('queued', 'leased') AND d.attempts > 0
  OR d.state IN ('refused', 'givenUp') AND d.createdAt > :notOutSince)`

export const notOutSince = (now: Date): Date => new Date(now.getTime() - notOutForMs)

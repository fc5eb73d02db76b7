/** Who asks: the session named by the cookie's token, asked of the database on every request. */
import type { RequestHandler } from 'express'
import type { Parts } from '../config/parts.ts'
import { sessionCookieName } from '../config/sessionCookie.ts'
import { identify } from '../services/sessions.ts'
import type { Caller } from '../services/sessions.ts'
import { withDeadline } from './deadline.ts'

const patienceMilliseconds = 4_000

declare module 'express-serve-static-core' {
  interface Request {
    /** Null: nobody is signed in. */
    visitor?: Caller | null
  }
}

export const authenticate =
  (parts: Parts): RequestHandler =>
  async (request, _response, next) => {
    const token: unknown = request.cookies?.[sessionCookieName(parts.environment)]
    request.visitor =
      typeof token === 'string' ? await withDeadline(identify(parts, token), patienceMilliseconds) : null
    next()
  }

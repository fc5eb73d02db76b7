import type { RequestHandler } from 'express'
import { Refused } from '../services/problems.ts'
import { starting } from '../services/readiness.ts'
import type { Readiness } from '../services/readiness.ts'

/** Until the schema is there, the API says that it is starting instead of failing in some other way. */
export const whenStarted =
  (readiness: Readiness): RequestHandler =>
  (_request, _response, next) => {
    if (!readiness.reasons().includes(starting)) return next()
    next(
      new Refused({
        status: 503,
        code: 'server.starting',
        title: 'Starting',
        detail: 'The program is starting. Try again in a moment.',
        retryAfterSeconds: 1,
      }),
    )
  }

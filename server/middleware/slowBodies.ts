/** Bodies are not waited for without end: a request has a minute, a file as long as it goes on coming. */
import type { Request, RequestHandler } from 'express'
import { Refused } from '../services/problems.ts'

const usualMs = 60_000

export interface SlowBodies {
  /** Bodies that may take longer than the usual while they come. */
  isFile(request: Request): boolean
  milliseconds?: number
}

export const slowBodies =
  ({ isFile, milliseconds = usualMs }: SlowBodies): RequestHandler =>
  (request, response, next) => {
    if (isFile(request)) {
      request.setTimeout(milliseconds, () => request.destroy())
      return next()
    }
    const timer = setTimeout(() => {
      if (request.complete || response.headersSent) return
      response.set('Connection', 'close')
      response.once('finish', () => request.destroy())
      next(tooSlow())
    }, milliseconds)
    timer.unref()
    for (const over of ['end', 'close'] as const) request.once(over, () => clearTimeout(timer))
    next()
  }

const tooSlow = (): Refused =>
  new Refused({
    status: 408,
    code: 'request.tooSlow',
    title: 'The request came too slowly',
    detail: 'Nothing was changed. Send it again.',
  })

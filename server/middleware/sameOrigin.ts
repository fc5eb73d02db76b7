/**
 * Changes come from our own pages only: the browser's own word on where a request comes from, the origin where it is
 * named, and a header that a form of another site cannot send.
 */
import type { RequestHandler } from 'express'
import type { Environment } from '../config/environment.ts'
import { isOwnOrigin } from '../config/origins.ts'
import { Refused } from '../services/problems.ts'

const reading = ['GET', 'HEAD', 'OPTIONS']
const ownSites = [undefined, 'same-origin', 'none']

export const sameOrigin =
  (environment: Environment): RequestHandler =>
  (request, _response, next) => {
    if (reading.includes(request.method)) return next()
    const fits =
      ownSites.includes(request.get('sec-fetch-site')) &&
      isOwnOrigin(environment, request.get('origin')) &&
      request.get('x-offing') === '1'
    if (fits) return next()
    next(
      new Refused({
        status: 403,
        code: 'request.foreignOrigin',
        title: 'Not from this program',
        detail: 'Changes are taken from the pages of this program only, with the header X-Offing: 1.',
      }),
    )
  }

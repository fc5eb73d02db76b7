/** The one place that gives an error its shape (RFC 9457). What was not foreseen says nothing but its number. */
import type { ErrorRequestHandler, Response } from 'express'
import type { Problem } from '../../shared/schemas/problem.ts'
import type { Logger } from '../config/logger.ts'
import { isDatabaseUnavailable } from '../config/databaseFaults.ts'
import { databaseUnavailable, Refused } from '../services/problems.ts'
import type { Refusal } from '../services/problems.ts'

const titles: Record<number, [code: string, title: string]> = {
  400: ['request.malformed', 'The request cannot be read'],
  404: ['request.unknownPath', 'Not found'],
  413: ['request.tooLarge', 'The request is too large'],
  415: ['request.unsupportedType', 'The kind of content is not taken'],
}

/** Errors of the framework carry a status of their own. */
function statusOf(error: unknown): number {
  const status = error instanceof Error && 'status' in error ? error.status : undefined
  return typeof status === 'number' && status >= 400 && status < 500 ? status : 500
}

export function refusalOf(error: unknown): Refusal {
  if (error instanceof Refused) return error.refusal
  if (isDatabaseUnavailable(error)) return databaseUnavailable().refusal
  const status = statusOf(error)
  const [code, title] = titles[status] ?? (status < 500 ? ['request.refused', 'Refused'] : ['server.fault', 'A fault'])
  return status < 500
    ? { status, code, title }
    : { status, code, title, detail: 'Something failed here. It is in the log under the number given as instance.' }
}

export function sendRefusal(response: Response, refusal: Refusal, instance: string): void {
  const { retryAfterSeconds, ...rest } = refusal
  const body: Problem = { type: `urn:offing:problem:${refusal.code}`, ...rest, instance }
  if (retryAfterSeconds !== undefined) response.set('Retry-After', String(Math.ceil(retryAfterSeconds)))
  response.status(refusal.status).set('Cache-Control', 'no-store').type('application/problem+json')
  response.send(JSON.stringify(body))
}

export const errorHandler =
  (logger: Logger): ErrorRequestHandler =>
  (error, request, response, next) => {
    const refusal = refusalOf(error)
    const instance = `urn:offing:request:${String(request.id)}`
    if (refusal.status >= 500) logger.error({ error, request: request.id, code: refusal.code }, 'request failed')
    if (response.headersSent) return next(error)
    sendRefusal(response, refusal, instance)
  }

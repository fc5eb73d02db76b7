/** One line a request: who, what, how long. No query, no body, and of a link's secret only its beginning. */
import { randomUUID } from 'node:crypto'
import type { RequestHandler } from 'express'
import { pinoHttp } from 'pino-http'
import type { Logger } from '../config/logger.ts'

/** Long pieces of a path are secrets of links. */
const withoutSecrets = (url: string): string =>
  (url.split('?').at(0) ?? '').replace(/[^/]{24,}/g, (piece) => `${piece.slice(0, 4)}…`)

export const requestLog = (logger: Logger): RequestHandler =>
  pinoHttp({
    logger,
    genReqId: () => randomUUID(),
    quietReqLogger: true,
    // Asked every few seconds by whatever watches over the process; what is amiss is in the log already.
    autoLogging: { ignore: (request) => request.url === '/healthz' || request.url === '/readyz' },
    // The error handler has logged the cause; what stands here would only be made up from the status.
    customErrorObject: (_request, _response, _error, { err: _madeUp, ...line }: { err?: unknown }) => line,
    customLogLevel: (_request, response, error) =>
      error || response.statusCode >= 500 ? 'error' : response.statusCode >= 400 ? 'info' : 'debug',
    serializers: {
      req: ({ id, method, url }: { id: string; method: string; url: string }) => ({
        id,
        method,
        url: withoutSecrets(url),
      }),
      res: ({ statusCode }: { statusCode: number }) => ({ statusCode }),
    },
    customProps: (request) => ({
      personId:
        'visitor' in request
          ? (request as { visitor?: { person: { id: number } } | null }).visitor?.person.id
          : undefined,
    }),
  })

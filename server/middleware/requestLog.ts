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

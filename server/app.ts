/** The Express app, put together without listening, so that tests use it as it is. */
import { fileURLToPath } from 'node:url'
import compression from 'compression'
import cookieParser from 'cookie-parser'
import express from 'express'
import type { Express, Request, RequestHandler } from 'express'
import type { Parts } from './config/parts.ts'
import { authenticate } from './middleware/authenticate.ts'
import { client } from './middleware/client.ts'
import { errorHandler } from './middleware/errorHandler.ts'
import { requestLog } from './middleware/requestLog.ts'
import { sameOrigin } from './middleware/sameOrigin.ts'
import { slowBodies } from './middleware/slowBodies.ts'
import { securityHeaders } from './middleware/securityHeaders.ts'
import { whenStarted } from './middleware/whenStarted.ts'
import { health } from './routes/health.ts'
import { allRoutes } from './routes/index.ts'
import { mountRoutes } from './routes/registry.ts'
import { Refused } from './services/problems.ts'
import { createReadiness } from './services/readiness.ts'
import type { Readiness } from './services/readiness.ts'

const clientFolder = fileURLToPath(new URL('../dist/client', import.meta.url))
const largestBody = '256kb'

export function createApp(parts: Parts, readiness: Readiness = createReadiness()): Express {
  const { environment, logger } = parts
  const app = express()
  app.disable('x-powered-by')
  app.set('trust proxy', environment.trustProxy)
  app.set('query parser', 'simple')
  app.use(requestLog(logger))
  app.use(slowBodies({ isFile: takesFile }))
  app.use(securityHeaders(environment))
  app.use(health(parts, readiness))
  app.use(compression())
  app.use('/api', cookieParser(), sameOrigin(environment), jsonOnly, express.json({ limit: largestBody }))
  app.use('/api', whenStarted(readiness), authenticate(parts))
  mountRoutes(app, allRoutes(parts))
  app.use('/api', unknownPath)
  // Looked for at each request: the client may still be building when the server begins.
  app.use(client(clientFolder))
  app.use(unknownPath)
  app.use(errorHandler(logger))
  return app
}

/** Files go in as they are; the header that sameOrigin asks for says that it is one of our own pages. */
const takesFile = (request: Request): boolean =>
  /^(\/api)?\/(stations\/\d+\/uploads|log\/\d+\/attachments)$/.test(request.path) &&
  request.is(['text/csv', 'text/plain', 'application/octet-stream']) !== false

/** A form of another site can send text and forms, but no JSON without being asked first. */
const jsonOnly: RequestHandler = (request, _response, next) => {
  const hasBody =
    request.headers['transfer-encoding'] !== undefined || Number(request.headers['content-length'] ?? 0) > 0
  if (!hasBody || request.is('application/json') || takesFile(request)) return next()
  next(
    new Refused({
      status: 415,
      code: 'request.unsupportedType',
      title: 'The kind of content is not taken',
      detail: 'Send application/json.',
    }),
  )
}

const unknownPath: RequestHandler = (request, _response, next) =>
  next(
    new Refused({
      status: 404,
      code: 'request.unknownPath',
      title: 'Not found',
      detail: `There is nothing at ${request.method} ${request.path.slice(0, 200)}.`,
    }),
  )

/** For whatever watches over the process. Outside `/api`: nobody signs in here, and nothing is given away. */
import express from 'express'
import type { Router } from 'express'
import type { Parts } from '../config/parts.ts'
import { reasonsNotReady } from '../services/readiness.ts'
import type { Readiness } from '../services/readiness.ts'

export function health(parts: Pick<Parts, 'sequelize'>, readiness: Readiness): Router {
  const router = express.Router()
  router.use((_request, response, next) => {
    response.set('Cache-Control', 'no-store')
    next()
  })
  router.get('/healthz', (_request, response) => {
    response.json({ alive: true })
  })
  router.get('/readyz', async (_request, response) => {
    const reasons = await reasonsNotReady(parts, readiness)
    response.status(reasons.length === 0 ? 200 : 503).json({ ready: reasons.length === 0, reasons })
  })
  return router
}

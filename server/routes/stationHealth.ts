import { z } from 'zod'
import { healthHour } from '../../shared/schemas/station.ts'
import { linkNow } from '../../shared/schemas/stationSetUpLink.ts'
import type { Parts } from '../config/parts.ts'
import { presentLink } from '../presenters/stationLink.ts'
import { healthHours } from '../services/stationHealth.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const time = z.iso.datetime().transform((text) => new Date(text))

export const stationHealthRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/stations/:stationId/health',
    action: 'stationHealth.read',
    summary: 'What was expected of each sensor and what came, hour by hour',
    params: z.object({ stationId: idInPath }),
    query: z.object({ from: time, to: time }),
    answer: z.array(healthHour),
    handle: ({ params, query }) => healthHours(parts, params.stationId, query),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/link',
    action: 'stationHealth.read',
    summary: 'What arrives from the station right now, sensor by sensor',
    params: z.object({ stationId: idInPath }),
    answer: linkNow,
    handle: ({ params }) => presentLink(parts, params.stationId),
  }),
]

import { z } from 'zod'
import { confirmedOffset, offsetConfirmation } from '../../shared/schemas/clockOffset.ts'
import { qualityTest } from '../../shared/schemas/estimate.ts'
import type { Parts } from '../config/parts.ts'
import { confirmClockOffset, listClockOffsets, readLevelDrift } from '../services/estimates.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const path = '/api/stations/:stationId/clockOffsets'
const stationInPath = z.object({ stationId: idInPath })

export const clockOffsetRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path,
    action: 'stations.read',
    summary: 'Clock offsets of sensors that are put right now',
    params: stationInPath,
    answer: z.array(confirmedOffset),
    handle: ({ params }) => listClockOffsets(parts, params.stationId),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/levelDrift',
    action: 'stations.read',
    summary: 'Drift of each sensor’s level against the others over a week, as tests',
    params: stationInPath,
    answer: z.array(qualityTest),
    handle: ({ params }) => readLevelDrift(parts, params.stationId),
  }),
  route({
    method: 'post',
    path,
    action: 'clockOffsets.change',
    summary: 'Confirm the clock offset that an estimate found; it is put right from now on',
    params: stationInPath,
    body: offsetConfirmation,
    answer: confirmedOffset,
    status: 201,
    handle: ({ params, body, caller }) => confirmClockOffset(parts, params.stationId, body, caller.person.id),
  }),
]

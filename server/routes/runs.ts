import { z } from 'zod'
import { runChoices, runComparison, runOrder, runView } from '../../shared/schemas/run.ts'
import type { Parts } from '../config/parts.ts'
import { compareRun, listRuns, orderRun, readRunChoices } from '../services/runs.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const stationInPath = z.object({ stationId: idInPath })
const runInPath = stationInPath.extend({ runId: idInPath })

export const runRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/stations/:stationId/runs',
    action: 'runs.read',
    summary: 'Recomputations of a station, newest first',
    params: stationInPath,
    answer: z.array(runView),
    handle: ({ params }) => listRuns(parts, params.stationId),
  }),
  route({
    method: 'post',
    path: '/api/stations/:stationId/runs',
    action: 'runs.change',
    summary: 'Recompute a past span into a labelled version; the operational record stays',
    params: stationInPath,
    body: runOrder,
    answer: runView,
    status: 201,
    handle: ({ params, body, caller }) => orderRun(parts, params.stationId, body, caller.person.id),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/runs/choices',
    action: 'runs.read',
    summary: 'Settings, deployments and corrections that a recomputation can use',
    params: stationInPath,
    answer: runChoices,
    handle: ({ params }) => readRunChoices(parts, params.stationId),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/runs/:runId/comparison',
    action: 'runs.read',
    summary: 'A recomputation held against the operational record',
    params: runInPath,
    answer: runComparison,
    handle: ({ params }) => compareRun(parts, params.stationId, params.runId),
  }),
]

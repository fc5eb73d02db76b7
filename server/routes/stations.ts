import { z } from 'zod'
import {
  currentEstimate,
  deploymentView,
  estimateView,
  seriesView,
  stationView,
  tracesChunk,
} from '../../shared/schemas/station.ts'
import { stationSettingsView } from '../../shared/schemas/stationSettings.ts'
import type { Parts } from '../config/parts.ts'
import { presentStation, presentStations } from '../presenters/station.ts'
import { estimatesBetween, wholeEstimate, wholeLatestEstimate } from '../services/estimates.ts'
import { invalidInput, notFound } from '../services/problems.ts'
import { recentTraces } from '../services/readings.ts'
import { readSeries } from '../services/series.ts'
import { listDeployments, listStationSettings, readStation } from '../services/stations.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const action = 'stations.read'
const time = z.iso.datetime().transform((text) => new Date(text))
const wholeNumber = (least: number, most: number, usual: number) =>
  z.coerce.number().int().min(least).max(most).default(usual)

const stationInPath = z.object({ stationId: idInPath })
const windowInPath = stationInPath.extend({ windowEndsAt: time })

/** With their systems; series are the way to look further. */
const longestListMs = 6 * 3_600_000

export const stationRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/stations',
    action,
    summary: 'All stations in service with link, newest estimate and last trusted one',
    answer: z.array(stationView),
    handle: () => presentStations(parts),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId',
    action,
    summary: 'One station',
    params: stationInPath,
    answer: stationView,
    handle: ({ params }) => presentStation(parts, params.stationId),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/deployments',
    action,
    summary: 'Surveys of the array, newest first',
    params: stationInPath,
    answer: z.array(deploymentView),
    handle: ({ params }) => listDeployments(parts, params.stationId),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/settings',
    action,
    summary: 'Versions of how the station is computed, newest first',
    params: stationInPath,
    answer: z.array(stationSettingsView),
    handle: ({ params }) => listStationSettings(params.stationId),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/estimates',
    action,
    summary: 'Estimates of the windows that end after from and not after to, at most six hours',
    params: stationInPath,
    query: z.object({ from: time, to: time }),
    answer: z.array(currentEstimate),
    async handle({ params: { stationId }, query: { from, to } }) {
      const length = to.getTime() - from.getTime()
      if (length <= 0) throw invalidInput([{ path: 'query.to', message: 'must be after from' }])
      if (length > longestListMs) {
        throw invalidInput([{ path: 'query.from', message: 'must be at most six hours before to' }])
      }
      await readStation(parts, stationId)
      return estimatesBetween(parts, stationId, from, to)
    },
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/estimates/latest',
    action,
    summary: 'The newest estimate with everything behind it',
    params: stationInPath,
    answer: estimateView,
    async handle({ params: { stationId } }) {
      await readStation(parts, stationId)
      const estimate = await wholeLatestEstimate(parts, stationId)
      if (!estimate) throw notFound('estimate', `of station ${stationId}`)
      return estimate
    },
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/estimates/:windowEndsAt',
    action,
    summary: 'One window with everything behind it; its newest revision where none is named',
    params: windowInPath,
    query: z.object({ revision: z.coerce.number().int().min(1).optional() }),
    answer: estimateView,
    async handle({ params: { stationId, windowEndsAt }, query: { revision } }) {
      await readStation(parts, stationId)
      const estimate = await wholeEstimate(parts, stationId, windowEndsAt, revision ?? null)
      if (!estimate) throw notFound('estimate', windowEndsAt.toISOString())
      return estimate
    },
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/series',
    action,
    summary: 'Height, period, bearing, speed and spread of the last hours; a missing window has no point',
    params: stationInPath,
    query: z.object({ hours: wholeNumber(1, 24 * 366, 12), stepSeconds: wholeNumber(10, 86_400, 300) }),
    answer: seriesView,
    handle: ({ params, query }) => readSeries(parts, params.stationId, query),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/traces',
    action,
    summary: 'The newest readings of all sensors, as the instruments gave them',
    params: stationInPath,
    query: z.object({ seconds: wholeNumber(1, 600, 90) }),
    answer: tracesChunk,
    async handle({ params: { stationId }, query: { seconds } }) {
      await readStation(parts, stationId)
      const traces = await recentTraces(stationId, seconds)
      if (!traces) throw notFound('reading', `of station ${stationId}`)
      return traces
    },
  }),
]

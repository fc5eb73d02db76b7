import { z } from 'zod'
import { estimateView, seriesView, stationView, tracesChunk } from '../../shared/schemas/station.ts'
import type { EstimateView, SeriesView, StationView, TracesChunk } from '../../shared/schemas/station.ts'
import { ProblemError } from './problem.ts'
import { request } from './request.ts'

export const readStations = (): Promise<StationView[]> => request('GET', '/api/stations', z.array(stationView))

export const readStation = (id: number): Promise<StationView> => request('GET', `/api/stations/${id}`, stationView)

/** Null: nothing was computed for this station yet. */
export async function readLatestEstimate(id: number): Promise<EstimateView | null> {
  try {
    return await request('GET', `/api/stations/${id}/estimates/latest`, estimateView)
  } catch (error) {
    if (error instanceof ProblemError && error.status === 404) return null
    throw error
  }
}

export const readSeries = (id: number, hours = 12, stepSeconds = 300): Promise<SeriesView> =>
  request('GET', `/api/stations/${id}/series?hours=${hours}&stepSeconds=${stepSeconds}`, seriesView)

export const readTraces = (id: number, seconds = 90): Promise<TracesChunk> =>
  request('GET', `/api/stations/${id}/traces?seconds=${seconds}`, tracesChunk)

/** A station as everyone sees it, put together from its tables, its link and its estimates: for REST and live alike. */
import type { StationView } from '../../shared/schemas/station.ts'
import type { Parts } from '../config/parts.ts'
import { currentEstimateOf, lastGoodEstimateOf } from '../services/estimates.ts'
import { linkOf } from '../services/readings.ts'
import { settingInForce } from '../services/settings.ts'
import { listStations, readStation } from '../services/stations.ts'
import type { StationFacts } from '../services/stations.ts'

async function present(parts: Parts, facts: StationFacts, leadStationId: number | null): Promise<StationView> {
  const estimate = await currentEstimateOf(parts, facts.id)
  const isGood = estimate?.resolved && (estimate.qualityFlag === 1 || estimate.qualityFlag === 3)
  const lastGood = isGood ? estimate : await lastGoodEstimateOf(parts, facts.id)
  return { ...facts, isLead: facts.id === leadStationId, link: linkOf(facts.id), estimate, lastGood }
}

export async function presentStation(parts: Parts, stationId: number): Promise<StationView> {
  const { leadStationId } = await settingInForce(parts, 'watch')
  return present(parts, await readStation(parts, stationId), leadStationId)
}

/** All stations in service, by id. */
export async function presentStations(parts: Parts): Promise<StationView[]> {
  const { leadStationId } = await settingInForce(parts, 'watch')
  const stations = await listStations(parts)
  return Promise.all(stations.map((facts) => present(parts, facts, leadStationId)))
}

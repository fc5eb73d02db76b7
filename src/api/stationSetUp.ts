import { z } from 'zod'
import { stationRecord, stationSettingsRecord } from '../../shared/schemas/stationSetUp.ts'
import type {
  StationChange,
  StationDraft,
  StationRecord,
  StationSettingsOrder,
  StationSettingsRecord,
} from '../../shared/schemas/stationSetUp.ts'
import { request } from './request.ts'

export const readStationRecords = (): Promise<StationRecord[]> =>
  request('GET', '/api/stationRecords', z.array(stationRecord))

export const readStationRecord = (id: number): Promise<StationRecord> =>
  request('GET', `/api/stations/${id}/record`, stationRecord)

export const addStation = (draft: StationDraft): Promise<StationRecord> =>
  request('POST', '/api/stations', stationRecord, draft)

export const changeStation = (id: number, version: number, change: StationChange): Promise<StationRecord> =>
  request('PUT', `/api/stations/${id}`, stationRecord, change, version)

export const retireStation = (id: number, version: number, reason: string): Promise<StationRecord> =>
  request('POST', `/api/stations/${id}/retire`, stationRecord, { reason }, version)

export const restoreStation = (id: number, version: number, reason: string): Promise<StationRecord> =>
  request('POST', `/api/stations/${id}/restore`, stationRecord, { reason }, version)

export const orderSettings = (
  id: number,
  version: number,
  order: StationSettingsOrder,
): Promise<StationSettingsRecord> =>
  request('POST', `/api/stations/${id}/settings`, stationSettingsRecord, order, version)

export const readSettingsHistory = (id: number): Promise<StationSettingsRecord[]> =>
  request('GET', `/api/stations/${id}/settings/history`, z.array(stationSettingsRecord))

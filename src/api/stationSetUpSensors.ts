import { z } from 'zod'
import { sensorRecord } from '../../shared/schemas/stationSetUpSensors.ts'
import type { ClockOffsetOrder, SensorChange, SensorRecord } from '../../shared/schemas/stationSetUpSensors.ts'
import { request } from './request.ts'

const sensors = (stationId: number): string => `/api/stations/${stationId}/sensors`

export const readSensors = (stationId: number): Promise<SensorRecord[]> =>
  request('GET', sensors(stationId), z.array(sensorRecord))

export const changeSensor = (
  stationId: number,
  { id, version }: SensorRecord,
  change: SensorChange,
): Promise<SensorRecord> => request('PUT', `${sensors(stationId)}/${id}`, sensorRecord, change, version)

export const addClockOffset = (stationId: number, sensorId: number, order: ClockOffsetOrder): Promise<SensorRecord> =>
  request('POST', `${sensors(stationId)}/${sensorId}/clockOffsets`, sensorRecord, order)

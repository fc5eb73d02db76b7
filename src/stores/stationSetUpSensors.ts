/** The register of instruments, station by station. */
import { defineStore } from 'pinia'
import { shallowReactive } from 'vue'
import type { ClockOffsetOrder, SensorChange, SensorRecord } from '../../shared/schemas/stationSetUpSensors.ts'
import * as api from '../api/stationSetUpSensors.ts'

export const useStationSetUpSensors = defineStore('stationSetUpSensors', () => {
  const held = shallowReactive(new Map<number, SensorRecord[]>())
  /** Deployed ones first, by letter. */
  const of = (stationId: number): SensorRecord[] => held.get(stationId) ?? []

  function apply(stationId: number, sensor: SensorRecord): void {
    held.set(
      stationId,
      of(stationId).map((one) => (one.id === sensor.id ? sensor : one)),
    )
  }
  async function read(stationId: number): Promise<void> {
    const sensors = await api.readSensors(stationId)
    const rank = ({ letter, serial }: SensorRecord): string => (letter === null ? `1${serial}` : `0${letter}`)
    held.set(
      stationId,
      sensors.sort((a, b) => rank(a).localeCompare(rank(b), 'en', { numeric: true })),
    )
  }
  const change = async (stationId: number, sensor: SensorRecord, next: SensorChange): Promise<void> =>
    apply(stationId, await api.changeSensor(stationId, sensor, next))
  const addClockOffset = async (stationId: number, sensorId: number, order: ClockOffsetOrder): Promise<void> =>
    apply(stationId, await api.addClockOffset(stationId, sensorId, order))

  return { of, apply, read, change, addClockOffset }
})

/** What is measured or foretold beside the arrays: water level, tide, air pressure, wind. */
import { defineStore } from 'pinia'
import { shallowReactive } from 'vue'
import type { AuxiliaryReadingGiven, AuxiliaryView } from '../../shared/schemas/stationSetUpAuxiliary.ts'
import * as api from '../api/stationSetUpAuxiliary.ts'
import type { AuxiliaryOutcome } from '../api/stationSetUpAuxiliary.ts'

export const useStationSetUpAuxiliary = defineStore('stationSetUpAuxiliary', () => {
  const held = shallowReactive(new Map<number, AuxiliaryView[]>())
  const of = (stationId: number): AuxiliaryView[] => held.get(stationId) ?? []
  const read = async (stationId: number): Promise<void> => void held.set(stationId, await api.readAuxiliary(stationId))
  async function enter(stationId: number, readings: AuxiliaryReadingGiven[]): Promise<AuxiliaryOutcome> {
    const outcome = await api.enterAuxiliary(stationId, readings)
    await read(stationId)
    return outcome
  }
  return { of, read, enter }
})

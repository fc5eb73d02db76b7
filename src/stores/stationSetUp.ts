/** Stations as administrators set them up, retired ones too. Every answer passes through `apply`. */
import { defineStore } from 'pinia'
import { computed, ref, shallowReactive } from 'vue'
import type {
  StationChange,
  StationDraft,
  StationRecord,
  StationSettingsOrder,
  StationSettingsRecord,
} from '../../shared/schemas/stationSetUp.ts'
import * as api from '../api/stationSetUp.ts'

export const useStationSetUp = defineStore('stationSetUp', () => {
  const held = shallowReactive(new Map<number, StationRecord>())
  const histories = shallowReactive(new Map<number, StationSettingsRecord[]>())
  const loaded = ref(false)

  const all = computed(() =>
    [...held.values()].sort(
      (a, b) => Number(a.state === 'retired') - Number(b.state === 'retired') || a.name.localeCompare(b.name),
    ),
  )
  const byId = (id: number): StationRecord | undefined => held.get(id)
  /** Versions of how it is computed, newest first. */
  const history = (id: number): StationSettingsRecord[] => histories.get(id) ?? []

  function apply(record: StationRecord): StationRecord {
    held.set(record.id, record)
    return record
  }

  async function read(): Promise<void> {
    const records = await api.readStationRecords()
    held.clear()
    records.forEach(apply)
    loaded.value = true
  }
  const open = async (id: number): Promise<StationRecord> => apply(await api.readStationRecord(id))
  const readHistory = async (id: number): Promise<void> => void histories.set(id, await api.readSettingsHistory(id))

  const create = async (draft: StationDraft): Promise<StationRecord> => apply(await api.addStation(draft))
  const change = async (id: number, version: number, next: StationChange): Promise<StationRecord> =>
    apply(await api.changeStation(id, version, next))
  const retire = async ({ id, version }: StationRecord, reason: string): Promise<StationRecord> =>
    apply(await api.retireStation(id, version, reason))
  const restore = async ({ id, version }: StationRecord, reason: string): Promise<StationRecord> =>
    apply(await api.restoreStation(id, version, reason))

  /** A new version of how the station is computed; the station itself is read again, because its version went on. */
  async function orderSettings(id: number, version: number, order: StationSettingsOrder): Promise<void> {
    await api.orderSettings(id, version, order)
    await Promise.all([open(id), readHistory(id)])
  }

  return {
    ...{ loaded, all, byId, history, apply, read, open, readHistory },
    ...{ create, change, retire, restore, orderSettings },
  }
})

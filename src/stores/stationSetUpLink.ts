/** Keys, the telemetry link as it is now, connection attempts, and what came in the last days. */
import { defineStore } from 'pinia'
import { shallowReactive, shallowRef } from 'vue'
import type { ConnectionAttempt, LinkNow } from '../../shared/schemas/stationSetUpLink.ts'
import * as api from '../api/stationSetUpLink.ts'
import type { HealthHour, IssuedStationKey, StationKeyView } from '../api/stationSetUpLink.ts'

export type { HealthHour, IssuedStationKey, StationKeyView }

export const useStationSetUpLink = defineStore('stationSetUpLink', () => {
  const keys = shallowReactive(new Map<number, StationKeyView[]>())
  const links = shallowReactive(new Map<number, LinkNow>())
  const health = shallowReactive(new Map<number, HealthHour[]>())
  /** Newest first; of all stations, and with keys that nobody knows. */
  const attempts = shallowRef<ConnectionAttempt[]>([])

  /** Newest first. */
  const keysOf = (stationId: number): StationKeyView[] => keys.get(stationId) ?? []
  const linkOf = (stationId: number): LinkNow | null => links.get(stationId) ?? null
  const healthOf = (stationId: number): HealthHour[] => health.get(stationId) ?? []

  async function readKeys(stationId: number): Promise<void> {
    const found = await api.readKeys(stationId)
    keys.set(
      stationId,
      found.sort((a, b) => b.id - a.id),
    )
  }
  async function issue(stationId: number, validUntil: string | null): Promise<IssuedStationKey> {
    const issued = await api.issueKey(stationId, validUntil)
    await readKeys(stationId)
    return issued
  }
  async function rotate(stationId: number, overlapMinutes: number): Promise<IssuedStationKey> {
    const issued = await api.rotateKeys(stationId, overlapMinutes)
    await readKeys(stationId)
    return issued
  }
  async function revoke(stationId: number, keyId: number): Promise<void> {
    await api.revokeKey(stationId, keyId)
    await readKeys(stationId)
  }
  /** What moves by the second. */
  async function readNow(stationId: number): Promise<void> {
    const [link, all] = await Promise.all([api.readLink(stationId), api.readConnections()])
    links.set(stationId, link)
    attempts.value = all
  }
  async function readHealth(stationId: number, fromMs: number, toMs: number): Promise<void> {
    health.set(stationId, await api.readHealth(stationId, new Date(fromMs).toISOString(), new Date(toMs).toISOString()))
  }

  return { attempts, keysOf, linkOf, healthOf, readKeys, issue, rotate, revoke, readNow, readHealth }
})

import { z } from 'zod'
import { healthHour, issuedStationKey, stationKeyView } from '../../shared/schemas/station.ts'
import { connectionAttempt, linkNow } from '../../shared/schemas/stationSetUpLink.ts'
import type { ConnectionAttempt, LinkNow } from '../../shared/schemas/stationSetUpLink.ts'
import { request } from './request.ts'

export type StationKeyView = z.infer<typeof stationKeyView>
export type IssuedStationKey = z.infer<typeof issuedStationKey>
export type HealthHour = z.infer<typeof healthHour>

const keys = (stationId: number): string => `/api/stations/${stationId}/keys`

export const readKeys = (stationId: number): Promise<StationKeyView[]> =>
  request('GET', keys(stationId), z.array(stationKeyView))

export const issueKey = (stationId: number, validUntil: string | null): Promise<IssuedStationKey> =>
  request('POST', keys(stationId), issuedStationKey, { validUntil })

export const rotateKeys = (stationId: number, overlapMinutes: number): Promise<IssuedStationKey> =>
  request('POST', `${keys(stationId)}/rotate`, issuedStationKey, { overlapMinutes })

export const revokeKey = (stationId: number, keyId: number): Promise<StationKeyView> =>
  request('POST', `${keys(stationId)}/${keyId}/revoke`, stationKeyView)

export const readHealth = (stationId: number, from: string, to: string): Promise<HealthHour[]> =>
  request('GET', `/api/stations/${stationId}/health?from=${from}&to=${to}`, z.array(healthHour))

export const readLink = (stationId: number): Promise<LinkNow> =>
  request('GET', `/api/stations/${stationId}/link`, linkNow)

/** Newest first; with keys that nobody knows too. */
export const readConnections = (): Promise<ConnectionAttempt[]> =>
  request('GET', '/api/connections', z.array(connectionAttempt))

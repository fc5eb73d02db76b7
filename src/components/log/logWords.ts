/** Where a line leads, and how large its files are. */
import type { RouteLocationRaw } from 'vue-router'
import type { LogEntryView, LogKind } from '../../../shared/schemas/watchLog.ts'

export interface LogLink {
  words: string
  to: RouteLocationRaw
}

/** Of a day's beginning: `Thu 12 Nov 2026` stands above the first line of each day. */
export const kindWords: Record<LogKind, string> = {
  entry: 'Written by people',
  watch: 'Watches',
  alert: 'Alerts',
  message: 'E-mails',
  limit: 'Limits',
  place: 'Places',
  notice: 'Flags and closures',
  bulletin: 'Bulletins',
  drill: 'Exercises',
  station: 'Stations',
  system: 'The program',
}

const numberOf = (value: number | string | undefined): number | null =>
  value !== undefined && Number.isInteger(Number(value)) ? Number(value) : null

export function linksOf({ links }: Pick<LogEntryView, 'links'>): LogLink[] {
  const found: LogLink[] = []
  const alertId = numberOf(links.alertId)
  const placeId = numberOf(links.placeId)
  const stationId = numberOf(links.stationId)
  if (alertId !== null) {
    found.push({ words: `Alert ${String(alertId).padStart(4, '0')}`, to: { name: 'alerts', params: { id: alertId } } })
  }
  if (placeId !== null) found.push({ words: 'The place', to: { name: 'place', params: { id: placeId } } })
  if (stationId !== null) found.push({ words: 'The station', to: { name: 'station', params: { id: stationId } } })
  return found
}

/** `1.2 MB`, `340 kB`; a file is never 0 kB. */
export const sizeWords = (bytes: number): string =>
  bytes >= 1_000_000 ? `${(bytes / 1_000_000).toFixed(1)} MB` : `${Math.max(1, Math.round(bytes / 1000))} kB`

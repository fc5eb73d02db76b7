/** Days and clocks as people at the port type them, and moments. Pure; an IANA zone is an argument. */
import { DateTime } from 'luxon'

/** ISO 8601 UTC of a local day and clock; null where it cannot be read or does not exist, as in the missing hour of spring. */
export function momentOf(day: string, time: string, timeZone: string): string | null {
  const local = DateTime.fromISO(`${day}T${time}`, { zone: timeZone })
  if (!local.isValid || local.toFormat('HH:mm') !== time.slice(0, 5)) return null
  return new Date(local.toMillis()).toISOString()
}

/** Local day (`2026-11-12`) and clock (`15:32`) of a moment, ms since 1970 UTC. */
export function localOf(ms: number, timeZone: string): { day: string; time: string } {
  const local = DateTime.fromMillis(ms, { zone: timeZone })
  return { day: local.toFormat('yyyy-MM-dd'), time: local.toFormat('HH:mm') }
}

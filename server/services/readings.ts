/** The readings of all stations: stored, read back, and what is known of the links they come over. */
import type { TracesChunk } from '../../shared/schemas/station.ts'
import { tracesOf } from './readings/announce.ts'
import { durableUntil } from './readings/links.ts'
import { joinWindow, loadParts } from './readings/window.ts'

export { durableUntil, linkOf, linkOfAll, noteClockOffset, noteConnected } from './readings/links.ts'
export { readWindow } from './readings/window.ts'
export type { ReadingSource, StoredWindow } from './readings/window.ts'
export type { Arrival, OpenStream, Outcome } from './readings/arrival.ts'
export { packFrame } from './readings/payload.ts'
export { loadStationFacts } from './readings/station.ts'
export type { StationFacts } from './readings/station.ts'
export { createReadingStore } from './readings/store.ts'
export type { ReadingStore } from './readings/store.ts'
export { compactReadings } from './readings/compaction.ts'
export { keepPartitions } from './readings/partitions.ts'

/** The newest readings of a station for the record section; null when it has none. */
export async function recentTraces(stationId: number, seconds: number): Promise<TracesChunk | null> {
  const to = durableUntil(stationId)
  if (to === null) return null
  const from = to - seconds * 1000
  return tracesOf(stationId, joinWindow(await loadParts(stationId, from, to), from, to))
}

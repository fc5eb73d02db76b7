import type { Clock } from '../../config/clock.ts'

const hourMs = 3_600_000
const keptAnHour = 3600

/** A station gone wild may fill the table of what is put aside only so fast; what is over is counted, not kept. */
export function createKeepAsideLimit(clock: Clock): (stationId: number) => boolean {
  const kept = new Map<number, { since: number; count: number }>()
  return (stationId) => {
    const now = clock.monotonic()
    const known = kept.get(stationId)
    const hour = known && now - known.since < hourMs ? known : { since: now, count: 0 }
    hour.count += 1
    kept.set(stationId, hour)
    return hour.count <= keptAnHour
  }
}

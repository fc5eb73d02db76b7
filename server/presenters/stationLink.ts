/** What arrives from a station right now, put together from its connection, its newest readings and its newest estimate. */
import type { LinkNow } from '../../shared/schemas/stationSetUpLink.ts'
import type { Parts } from '../config/parts.ts'
import { livingConnection } from '../services/connections.ts'
import { wholeLatestEstimate } from '../services/estimates.ts'
import { linkOf, readWindow } from '../services/readings.ts'
import { listSensors } from '../services/sensors.ts'
import { readStation } from '../services/stations.ts'

const recordMs = 20 * 60_000

export async function presentLink(parts: Parts, stationId: number): Promise<LinkNow> {
  const station = await readStation(parts, stationId)
  const now = parts.clock.now().getTime()
  const sensors = station.deployment?.sensors ?? []
  const grid = { letters: sensors.map(({ letter }) => letter), sampleRate: station.sampleRate }
  const [register, readings, estimate] = await Promise.all([
    listSensors(parts, stationId),
    readWindow(stationId, now - recordMs, now, grid),
    wholeLatestEstimate(parts, stationId),
  ])
  const living = livingConnection(stationId, now)
  return {
    stationId,
    link: linkOf(stationId),
    connectedSince: living?.startedAt ?? null,
    software: living?.software ?? null,
    sampleRate: station.sampleRate,
    arrivingRate: living?.arrivingRate ?? null,
    latencySeconds: living?.latencySeconds ?? null,
    sensors: sensors.map(({ letter, serial, kind }, index) => {
      const offset = register.find((one) => one.letter === letter)?.clockOffsets.find(({ isInForce }) => isInForce)
      const fitted = estimate?.detail?.sensors.find(({ id }) => id === letter)
      return {
        ...{ letter, serial, kind },
        ...newestOf(readings.series[index] ?? new Float64Array(), readings.startMs, station.sampleRate),
        confirmedClockOffset: offset?.offsetSeconds ?? null,
        fittedClockOffset: fitted?.clockOffset ?? null,
        fittedClockOffsetSd: fitted?.clockOffsetSd ?? null,
      }
    }),
  }
}

function newestOf(series: Float64Array, startMs: number, sampleRate: number) {
  let present = 0
  let newest: number | null = null
  series.forEach((value, n) => {
    if (Number.isNaN(value)) return
    present += 1
    newest = n
  })
  return {
    recordShare: series.length === 0 ? 0 : present / series.length,
    newestValue: newest === null ? null : (series[newest] ?? null),
    newestAt: newest === null ? null : new Date(startMs + (newest / sampleRate) * 1000).toISOString(),
  }
}

/** Readings of a simple sea in the store, as a station's link or an import would have left them. */
import { ReadingBlock } from '../../server/models/index.ts'
import { noteDurable } from '../../server/services/readings/links.ts'
import { packBlock } from '../../server/services/readings/payload.ts'
import { toStored } from '../../shared/readings/span.ts'
import type { StationMade } from './factories.ts'

export interface Sea {
  /** Of the whole, m. */
  significantWaveHeight: number
  peakPeriod: number
  /** Degrees true. */
  toward: number
  waterDepth: number
}

export const gentleSwell: Sea = { significantWaveHeight: 1.2, peakPeriod: 10, toward: 60, waterDepth: 12 }

/** Components of one narrow swell with fixed phases, all toward one bearing. */
const components = Array.from({ length: 24 }, (_, n) => ({
  detune: (n - 11.5) * 0.0016,
  phase: (n * n * 2.399) % 6.283,
}))

/** Wave number by Newton's method on omega² = g k tanh(k h). */
function waveNumber(frequency: number, depth: number): number {
  const omega = 2 * Math.PI * frequency
  let k = (omega * omega) / 9.81
  for (let n = 0; n < 60; n += 1) {
    const t = Math.tanh(k * depth)
    k -= (9.81 * k * t - omega * omega) / (9.81 * t + 9.81 * k * depth * (1 - t * t))
  }
  return k
}

/** Surface elevation in metres at a place and time; the same for the same arguments. */
export function surfaceOf(sea: Sea): (east: number, north: number, timeMs: number) => number {
  const amplitude = (sea.significantWaveHeight / 4) * Math.sqrt(2 / components.length)
  const bearing = (sea.toward * Math.PI) / 180
  const waves = components.map(({ detune, phase }) => {
    const frequency = 1 / sea.peakPeriod + detune
    const k = waveNumber(frequency, sea.waterDepth)
    return { omega: 2 * Math.PI * frequency, east: k * Math.sin(bearing), north: k * Math.cos(bearing), phase }
  })
  return (east, north, timeMs) => {
    const t = (timeMs % 86_400_000) / 1000
    return waves.reduce(
      (sum, w) => sum + amplitude * Math.cos(w.omega * t - w.east * east - w.north * north + w.phase),
      0,
    )
  }
}

export interface StoredSpanWanted {
  from: Date
  to: Date
  commitId: number
  sea?: Sea
  source?: 'live' | 'late' | 'import' | 'demonstration'
  part?: number
  /** Arrived less sent, s. */
  clockOffset?: number | null
  /** Letters of sensors that give nothing. */
  silent?: string[]
}

/** Whole minutes of surface readings, one packed row each. */
export async function storeSea(made: StationMade, wanted: StoredSpanWanted): Promise<void> {
  const { station, deployment, sensors } = made
  const { sampleRate } = station
  const surface = surfaceOf(wanted.sea ?? gentleSwell)
  const rows = []
  for (let minute = wanted.from.getTime(); minute < wanted.to.getTime(); minute += 60_000) {
    const length = 60 * sampleRate
    const series = sensors.map(({ east, north, letter }) =>
      Float64Array.from({ length }, (_, n) =>
        wanted.silent?.includes(letter) ? NaN : toStored(surface(east, north, minute + (n * 1000) / sampleRate)),
      ),
    )
    const letters = sensors.map(({ letter }) => letter)
    const span = { sampleRate, firstSlot: (minute / 1000) * sampleRate, letters, series }
    rows.push({
      stationId: station.id,
      startsAt: new Date(minute),
      part: wanted.part ?? 1,
      deploymentId: deployment.id,
      firstCommitId: wanted.commitId,
      lastCommitId: wanted.commitId,
      source: wanted.source ?? ('live' as const),
      importId: null,
      sampleRate,
      sampleCount: length * sensors.length,
      missingCount: 0,
      clockOffset: wanted.clockOffset ?? null,
      ...packBlock(span),
    })
    noteDurable(station.id, minute, minute + 60_000, length * sensors.length)
  }
  await ReadingBlock.bulkCreate(rows)
}

/** An array that resolves a swell: five surface sensors some tens of metres apart. */
export const surfaceArray = {
  kind: 'surface' as const,
  sampleRate: 2,
  heightAboveBed: 12,
  positions: [
    [-16, -9],
    [14, -14],
    [-3, 20],
    [4, 2],
    [20, 12],
  ] satisfies [number, number][],
}

/**
 * What an array's sensors write down of the sea: level with tide, noise, resolution, and their faults. A pure
 * function of time, so that a past written to a file and a stream sent live hold the same numbers.
 */
import { standardGravity } from '../../shared/waves/dispersion.ts'
import type { Scenario } from '../scenarios/scenario.ts'
import { depthAt } from '../sea/nearshore.ts'
import { hashText, normalAt } from '../sea/random.ts'
import { createStationSea } from '../sea/stationSea.ts'
import { tideLevel } from '../../shared/demonstration/tide.ts'
import { clockOffsetOf, spoil } from './faults.ts'

export interface ArrayStation {
  code: string
  waterDepth: number
  sampleRate: number
  sensors: { letter: string; kind: 'pressure' | 'surface'; east: number; north: number; heightAboveBed: number }[]
}

export interface ReadingsWanted {
  seed: number
  scenario: Scenario
  anchor: number
  station: ArrayStation
}

export interface ReadingSource {
  /** One array a sensor, null where a sample is missing; samples are numbered from 1970 UTC at the station's rate. */
  readings(firstSample: number, count: number): (number | null)[][]
}

/** kg/m³. */
const density = 1025
/** dbar for a metre of water. */
export const decibarPerMetre = (density * standardGravity) / 10_000

/** Standard deviation of a sensor's own noise and its smallest step: m, or dbar. */
const make = {
  pressure: { noise: 0.0008, decimals: 4 },
  surface: { noise: 0.012, decimals: 3 },
}

export function createReadings(wanted: ReadingsWanted): ReadingSource {
  const { scenario, anchor, station, seed } = wanted
  const faults = scenario.faults ?? []
  const sea = createStationSea({
    seed,
    scenario,
    anchor,
    site: station,
    sampleRate: station.sampleRate,
    sensors: station.sensors,
    clockOffsetAt: (index, time) => clockOffsetOf(faults, index, (time - anchor) / 1000),
  })
  const noiseSeeds = station.sensors.map(({ letter }) => hashText(`${seed}/noise/${station.code}/${letter}`))

  function healthy(firstSample: number, count: number): number[][] {
    return sea.heights(firstSample, count).map((heights, m) => {
      const { kind, heightAboveBed } = station.sensors[m]
      const { noise, decimals } = make[kind]
      const values: number[] = new Array(count)
      for (let n = 0; n < count; n++) {
        const time = ((firstSample + n) / station.sampleRate) * 1000
        const level =
          kind === 'surface'
            ? tideLevel(time) + heights[n]
            : (depthAt(station, time) - heightAboveBed + heights[n]) * decibarPerMetre
        values[n] = roundTo(level + noise * normalAt(noiseSeeds[m], firstSample + n), decimals)
      }
      return values
    })
  }

  const anchorSample = Math.ceil((anchor / 1000) * station.sampleRate)
  const anchorReadings = faults.some(({ kind }) => kind === 'stuck')
    ? healthy(anchorSample, 1).map(([value]) => value)
    : []
  return {
    readings: (firstSample, count) =>
      healthy(firstSample, count).map((values, m) =>
        spoil(values, {
          faults,
          sensorIndex: m,
          firstSample,
          anchorSample,
          anchorReading: anchorReadings[m],
          noiseSeed: noiseSeeds[m],
        }),
      ),
  }
}

function roundTo(value: number, decimals: number): number {
  const scale = 10 ** decimals
  return Math.round(value * scale) / scale || 0
}

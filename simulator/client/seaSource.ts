/** Frames of the made sea. */
import type { DemonstrationStation } from '../../shared/demonstration/stations.ts'
import { createReadings } from '../array/readings.ts'
import type { SeaChoice } from '../options.ts'
import type { FrameSource } from './frameSource.ts'

export function seaSource(sea: SeaChoice, station: DemonstrationStation): FrameSource {
  const source = createReadings({ ...sea, station })
  return {
    code: station.code,
    sampleRate: station.sampleRate,
    sensors: station.sensors.map(({ letter, kind }) => ({ id: letter, kind })),
    endsAt: null,
    valuesAt: (start) => source.readings((start / 1000) * station.sampleRate, station.sampleRate),
  }
}

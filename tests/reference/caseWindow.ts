/** A reference case read in this process, as the estimator takes it. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { z } from 'zod'
import { parseReadings } from '../../shared/readings/readingsCsv.ts'
import { depthFromReadings } from '../../shared/waves/waterDepth.ts'
import { defaultEstimateSettings } from '../../shared/waves/window.ts'
import type { ArrayWindow } from '../../shared/waves/window.ts'

const station = z.object({
  waterDepth: z.number(),
  sampleRate: z.number(),
  sensors: z.array(
    z.object({
      id: z.string(),
      kind: z.enum(['surface', 'pressure']),
      east: z.number(),
      north: z.number(),
      heightAboveBed: z.number(),
    }),
  ),
})

export const casesFolder = join(import.meta.dirname, 'cases')

export function caseWindow(name: string): ArrayWindow {
  const read = (file: string) => readFileSync(join(casesFolder, name, file), 'utf8')
  const { sensors, sampleRate, waterDepth } = station.parse(JSON.parse(read('station.json')))
  const ids = sensors.map((sensor) => sensor.id)
  const readings = parseReadings(read('readings.csv'), ids, sampleRate)
  const series = ids.map((id) => readings.series[readings.ids.indexOf(id)])
  const settings = defaultEstimateSettings
  const { depth, source } = depthFromReadings(sensors, series, waterDepth, settings.density, settings.gravity)
  return { sampleRate, sensors, series, waterDepth: depth, waterDepthSource: source, settings }
}

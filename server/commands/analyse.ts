/**
 * `npm run analyse -- station.json readings.csv [--json]`: one recording through the estimator, as a table or as JSON. Exit codes: 0 an
 * answer, a refusal too; 2 a file that is no station or no recording, said in one line on standard error.
 */
import { readFileSync } from 'node:fs'
import { basename } from 'node:path'
import { z } from 'zod'
import { parseReadings, ReadingsFault } from '../../shared/readings/readingsCsv.ts'
import { estimate } from '../../shared/waves/estimate.ts'
import { depthFromReadings } from '../../shared/waves/waterDepth.ts'
import { defaultEstimateSettings } from '../../shared/waves/window.ts'
import type { ArrayWindow } from '../../shared/waves/window.ts'
import { estimateTable } from './estimateTable.ts'

const stationFile = z.object({
  name: z.string(),
  waterDepth: z.number().positive(),
  sampleRate: z.number().positive(),
  sensors: z
    .array(
      z.object({
        id: z.string().min(1),
        kind: z.enum(['surface', 'pressure']),
        east: z.number(),
        north: z.number(),
        heightAboveBed: z.number().nonnegative(),
        positionSd: z.number().positive().optional(),
        clockSd: z.number().nonnegative().optional(),
        clockOffset: z.number().optional(),
      }),
    )
    .min(1),
})

/** Ends the command with exit code 2 and one line. */
class FileFault extends Error {}

function read(path: string): string {
  try {
    return readFileSync(path, 'utf8')
  } catch (error) {
    throw new FileFault(`${basename(path)}: cannot be read (${error instanceof Error ? error.message : String(error)})`)
  }
}

function readStation(path: string): z.infer<typeof stationFile> {
  const text = read(path)
  let content: unknown
  try {
    content = JSON.parse(text)
  } catch {
    throw new FileFault(`${basename(path)}: line 1: is no JSON`)
  }
  const parsed = stationFile.safeParse(content)
  if (parsed.success) return parsed.data
  const issue = parsed.error.issues[0]
  throw new FileFault(`${basename(path)}: ${issue.path.join('.')}: ${issue.message}`)
}

function readWindow(stationPath: string, readingsPath: string): ArrayWindow {
  const station = readStation(stationPath)
  const ids = station.sensors.map((sensor) => sensor.id)
  const text = read(readingsPath)
  try {
    const readings = parseReadings(text, ids, station.sampleRate)
    const series = ids.map((id) => readings.series[readings.ids.indexOf(id)])
    const { density, gravity } = defaultEstimateSettings
    const { depth, source } = depthFromReadings(station.sensors, series, station.waterDepth, density, gravity)
    return {
      sampleRate: station.sampleRate,
      sensors: station.sensors,
      series,
      waterDepth: depth,
      waterDepthSource: source,
      settings: defaultEstimateSettings,
    }
  } catch (error) {
    if (!(error instanceof ReadingsFault)) throw error
    throw new FileFault(`${basename(readingsPath)}: ${error.line > 0 ? `line ${error.line}: ` : ''}${error.message}`)
  }
}

function main(): number {
  const paths = process.argv.slice(2).filter((argument) => !argument.startsWith('--'))
  const [stationPath, readingsPath] = paths
  if (!stationPath || !readingsPath) {
    process.stderr.write('usage: npm run analyse -- station.json readings.csv [--json]\n')
    return 2
  }
  try {
    const result = estimate(readWindow(stationPath, readingsPath))
    process.stdout.write(process.argv.includes('--json') ? `${JSON.stringify(result)}\n` : estimateTable(result))
    return 0
  } catch (error) {
    if (!(error instanceof FileFault)) throw error
    process.stderr.write(`${error.message.replaceAll(/\s+/g, ' ')}\n`)
    return 2
  }
}

process.exitCode = main()

/** A recorded array: `station.json` with its sensors and `readings.csv`, `time,ID,ID,…`, one row a sample. */
import { readFileSync } from 'node:fs'
import { z } from 'zod'
import { UsageError } from '../usageError.ts'

const recordedStation = z.object({
  sampleRate: z.number().positive().max(64),
  sensors: z
    .array(z.object({ id: z.string().min(1).max(16), kind: z.enum(['pressure', 'surface']) }))
    .min(1)
    .max(32),
})

export interface Recording {
  sampleRate: number
  sensors: { id: string; kind: 'pressure' | 'surface' }[]
  /** samples[n][m]: sensor m at n / sampleRate after the first row; a row that is missing is an array of nulls. */
  samples: (number | null)[][]
}

/** Errors: UsageError naming file, line and reason. */
export function readRecording(stationFile: string, readingsFile: string): Recording {
  const station = readStation(stationFile)
  if (!Number.isInteger(station.sampleRate)) {
    throw new UsageError(
      `${stationFile}: ${station.sampleRate} Hz is no whole number of samples a second, as frames want`,
    )
  }
  const lines = readText(readingsFile).split(/\r?\n/)
  const header = lines[0].split(',').map((cell) => cell.trim())
  if (header[0] !== 'time') throw new UsageError(`${readingsFile}, line 1: the first column must be "time"`)
  const columns = station.sensors.map(({ id }) => {
    const column = header.indexOf(id)
    if (column < 1) throw new UsageError(`${readingsFile}, line 1: there is no column for sensor ${id}`)
    return column
  })
  return { ...station, samples: readSamples(lines, columns, station.sampleRate, readingsFile) }
}

function readStation(file: string) {
  let content: unknown
  try {
    content = JSON.parse(readText(file))
  } catch (error) {
    if (error instanceof UsageError) throw error
    throw new UsageError(`${file}: no JSON`)
  }
  const parsed = recordedStation.safeParse(content)
  if (parsed.success) return parsed.data
  const [issue] = parsed.error.issues
  throw new UsageError(`${file}: ${issue.path.join('.') || 'station'}: ${issue.message}`)
}

function readText(file: string): string {
  try {
    return readFileSync(file, 'utf8').replace(/^\uFEFF/, '')
  } catch (error) {
    throw new UsageError(`${file}: ${error instanceof Error ? error.message : String(error)}`)
  }
}

function readSamples(lines: string[], columns: number[], sampleRate: number, file: string): (number | null)[][] {
  const samples: (number | null)[][] = []
  const interval = 1000 / sampleRate
  let first = NaN
  for (let index = 1; index < lines.length; index++) {
    if (lines[index] === '') continue
    const cells = lines[index].split(',')
    const time = Date.parse(cells[0])
    if (Number.isNaN(time)) throw new UsageError(`${file}, line ${index + 1}: "${cells[0]}" is no time`)
    if (Number.isNaN(first)) first = time
    const slot = Math.round((time - first) / interval)
    if (slot < samples.length) throw new UsageError(`${file}, line ${index + 1}: time does not go on`)
    if (Math.abs(time - first - slot * interval) > interval / 4 + 1) {
      throw new UsageError(
        `${file}, line ${index + 1}: the rows do not come at ${sampleRate} Hz, and nothing is resampled`,
      )
    }
    if (slot > samples.length + 86_400 * sampleRate)
      throw new UsageError(`${file}, line ${index + 1}: a gap of more than a day`)
    while (samples.length < slot) samples.push(columns.map(() => null))
    samples.push(columns.map((column) => readCell(cells[column], index + 1, file)))
  }
  if (samples.length < sampleRate) throw new UsageError(`${file}: less than one second of readings`)
  return samples
}

function readCell(cell: string | undefined, line: number, file: string): number | null {
  if (cell === undefined || cell.trim() === '') return null
  const value = Number(cell)
  if (Number.isFinite(value)) return value
  throw new UsageError(`${file}, line ${line}: "${cell}" is no number`)
}

/**
 * A recording as a text file: `time,A,B,…`, ISO 8601 UTC times, one column a sensor, an empty cell for a missing reading, a missing
 * row for a dropped frame.
 */

export interface CsvReadings {
  /** Sensor ids in the order of the columns. */
  ids: string[]
  /** Milliseconds since 1970 of the first sample. */
  startsAt: number
  /** One series a column, NaN for missing. */
  series: Float64Array[]
  /** Rows that were missing between the first and the last. */
  droppedRows: number
}

/** A file that is no recording: which line, and why. Line 1 is the heading; 0 the file as a whole. */
export class ReadingsFault extends Error {
  readonly line: number
  constructor(line: number, reason: string) {
    super(reason)
    this.name = 'ReadingsFault'
    this.line = line
  }
}

const timePattern = /^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d(?:\.\d+)?Z$/

/**
 * Parses and puts the rows on the grid of the sample rate (Hz). `expected` are the sensors that must be there, in any order.
 * Errors: ReadingsFault with the line.
 */
export function parseReadings(text: string, expected: readonly string[], sampleRate: number): CsvReadings {
  const lines = text.split(/\r?\n/)
  while (lines.length > 0 && lines[lines.length - 1].trim() === '') lines.pop()
  if (lines.length === 0) throw new ReadingsFault(0, 'the file is empty')
  const ids = headingIds(lines[0], expected)
  if (lines.length < 2) throw new ReadingsFault(0, 'there is a heading but no readings')
  const interval = 1000 / sampleRate
  const places: number[] = []
  const rows: number[][] = []
  let startsAt = 0
  let previous = -Infinity
  for (let n = 1; n < lines.length; n++) {
    const cells = lines[n].split(',')
    if (cells.length !== ids.length + 1) {
      throw new ReadingsFault(n + 1, `${cells.length} columns where the heading has ${ids.length + 1}`)
    }
    const time = timePattern.test(cells[0]) ? Date.parse(cells[0]) : NaN
    if (Number.isNaN(time)) throw new ReadingsFault(n + 1, `"${cells[0].slice(0, 40)}" is no UTC time`)
    if (n === 1) startsAt = time
    const place = Math.round((time - startsAt) / interval)
    if (time <= previous || (places.length > 0 && place <= places[places.length - 1])) {
      throw new ReadingsFault(n + 1, `the clock goes backwards or stands still at ${cells[0]}`)
    }
    if (place > 40 * 1e6) throw new ReadingsFault(n + 1, `${cells[0]} is too far from the first reading`)
    if (Math.abs(time - startsAt - place * interval) > 0.4 * interval) {
      throw new ReadingsFault(n + 1, `${cells[0]} does not lie on the grid of ${sampleRate} Hz`)
    }
    previous = time
    places.push(place)
    rows.push(cells.slice(1).map((cell, column) => readingOf(cell, n + 1, ids[column])))
  }
  const length = places[places.length - 1] + 1
  const series = ids.map(() => new Float64Array(length).fill(NaN))
  rows.forEach((row, n) => row.forEach((value, column) => (series[column][places[n]] = value)))
  return { ids, startsAt, series, droppedRows: length - rows.length }
}

function headingIds(heading: string, expected: readonly string[]): string[] {
  const [first, ...ids] = heading.split(',').map((cell) => cell.trim())
  if (first !== 'time') throw new ReadingsFault(1, `the first column is "${first.slice(0, 40)}", not "time"`)
  const unknown = ids.find((id) => !expected.includes(id))
  if (unknown !== undefined) throw new ReadingsFault(1, `sensor "${unknown.slice(0, 40)}" is not in the station file`)
  const missing = expected.find((id) => !ids.includes(id))
  if (missing !== undefined) throw new ReadingsFault(1, `the column of sensor "${missing}" is missing`)
  const twice = ids.find((id, n) => ids.indexOf(id) !== n)
  if (twice !== undefined) throw new ReadingsFault(1, `the column of sensor "${twice}" is there twice`)
  return ids
}

function readingOf(cell: string, line: number, id: string): number {
  const trimmed = cell.trim()
  if (trimmed === '') return NaN
  const value = Number(trimmed)
  if (!Number.isFinite(value)) throw new ReadingsFault(line, `"${trimmed.slice(0, 40)}" under ${id} is no number`)
  return value
}

/** Traces of an array on baselines that stand as far apart as the sensors do along the heading. */
import { crestsOf, followCrests } from './crestPicks.ts'
import type { FollowedCrest } from './crestPicks.ts'

/** The newest readings as the live room gives them. */
export interface RecordedTraces {
  startsAtMs: number
  /** Seconds between samples. */
  interval: number
  sensors: readonly string[]
  /** values[i][n] of sensor i; null = missing. */
  values: readonly (readonly (number | null)[])[]
}

export interface RecordedSensor {
  name: string
  /** Metres, true north. */
  east: number
  north: number
}

/** The fitted vector by which the traces are ordered and the line is drawn. */
export interface RecordedHeading {
  toward: number
  /** s/m, as the lags say. */
  slowness: number
  period: number
}

export interface RecordRow {
  name: string
  /** Metres along the heading from the first sensor; null without a heading. */
  along: number | null
  /** About the mean of the record; NaN for missing. */
  values: number[]
}

const radians = Math.PI / 180

/** Rows in the order in which the waves reach them, or as deployed where there is no heading. */
export function recordRows(
  traces: RecordedTraces,
  sensors: readonly RecordedSensor[],
  heading: RecordedHeading | null,
): RecordRow[] {
  const rows = sensors.flatMap((sensor): RecordRow[] => {
    const index = traces.sensors.indexOf(sensor.name)
    if (index < 0) return []
    const values = traces.values[index].map((value) => value ?? Number.NaN)
    const known = values.filter((value) => !Number.isNaN(value))
    const mean = known.reduce((sum, value) => sum + value, 0) / Math.max(1, known.length)
    const along = heading
      ? sensor.east * Math.sin(heading.toward * radians) + sensor.north * Math.cos(heading.toward * radians)
      : null
    return [{ name: sensor.name, along, values: values.map((value) => value - mean) }]
  })
  if (!heading) return rows
  const nearest = Math.min(...rows.map((row) => row.along ?? 0))
  return rows.map((row) => ({ ...row, along: (row.along ?? 0) - nearest })).sort((a, b) => a.along - b.along)
}

/** Followed crests of the rows, newest first; none without a heading. */
export function recordCrests(
  rows: readonly RecordRow[],
  interval: number,
  heading: RecordedHeading | null,
): FollowedCrest[] {
  if (!heading || rows.length < 3) return []
  const traces = rows.map((row) => ({ along: row.along ?? 0, values: row.values }))
  return followCrests(traces, interval, heading.slowness, heading.period)
}

/** Greatest deviation that the drawing allows for: the second highest crest of the loudest trace, or 0. */
export function recordAmplitude(rows: readonly RecordRow[], interval: number): number {
  const heights = rows.map((row) =>
    crestsOf(row.values, interval)
      .map((crest) => crest.value)
      .sort((a, b) => b - a),
  )
  return Math.max(0, ...heights.map((values) => values[Math.min(1, values.length - 1)] ?? 0))
}

/** Base lines between top and bottom: by distance along the heading, or evenly. */
export function baselines(rows: readonly RecordRow[], top: number, bottom: number): number[] {
  const furthest = Math.max(0, ...rows.map((row) => row.along ?? 0))
  const even = rows.length > 1 ? (bottom - top) / (rows.length - 1) : 0
  return rows.map((row, index) =>
    row.along === null || furthest === 0 ? top + even * index : top + (row.along / furthest) * (bottom - top),
  )
}

/** Label heights moved apart to at least `gap`, as little as possible and in the same order. */
export function spreadApart(heights: readonly number[], gap: number): number[] {
  const groups = heights.map((height) => ({ middle: height, count: 1 }))
  for (let index = 1; index < groups.length;) {
    const [a, b] = [groups[index - 1], groups[index]]
    const needed = ((a.count + b.count) / 2) * gap
    if (b.middle - a.middle >= needed) {
      index++
      continue
    }
    const first = a.middle - ((a.count - 1) / 2) * gap
    const second = b.middle - ((b.count - 1) / 2) * gap - a.count * gap
    const count = a.count + b.count
    const start = (first * a.count + second * b.count) / count
    groups.splice(index - 1, 2, { middle: start + ((count - 1) / 2) * gap, count })
    index = Math.max(1, index - 1)
  }
  return groups.flatMap(({ middle, count }) =>
    Array.from({ length: count }, (_, index) => middle + (index - (count - 1) / 2) * gap),
  )
}

/** Where things of a place's trend stand: times and values in, pixels out. Values come in the unit that is read. Pure. */
import { niceTicks, unbroken } from './niceScale.ts'

export interface TrendPoint {
  ms: number
  /** Null: no figure then, a gap. */
  value: number | null
  /** Likely band, where there is one. */
  from: number | null
  to: number | null
  isSubstitute: boolean
}

export interface TrendBox {
  width: number
  height: number
  left: number
  right: number
  top: number
  bottom: number
}

export interface TrendScale {
  ticks: number[]
  x(ms: number): number
  y(value: number): number
}

export const trendHours = 12
const hourMs = 3_600_000
/** Longer than this without a figure is a gap. */
export const trendGapMs = 20 * 60_000
/** A logarithmic axis begins here at least, so many powers of ten below its top. */
const decades = 3

/** `lines`: thresholds that must be inside. */
export function trendScale(
  points: readonly TrendPoint[],
  lines: readonly number[],
  box: TrendBox,
  nowMs: number,
  isLog: boolean,
): TrendScale {
  const values = points.flatMap(({ value, from, to }) => [value ?? [], from ?? [], to ?? []].flat())
  const ticks = isLog ? powers([...values, ...lines]) : niceTicks(0, Math.max(...values, ...lines, 0.01) * 1.08)
  const scaled = (value: number): number => (isLog ? Math.log10(Math.max(value, ticks[0])) : value)
  const [bottom, top] = [scaled(ticks[0]), scaled(ticks[ticks.length - 1])]
  const inner = box.height - box.top - box.bottom
  return {
    ticks,
    x: (ms) => box.left + (1 + (ms - nowMs) / (trendHours * hourMs)) * (box.width - box.left - box.right),
    y: (value) => box.top + inner * (1 - (scaled(value) - bottom) / (top - bottom)),
  }
}

/** Whole powers of ten about the values, three decades at least. */
function powers(values: number[]): number[] {
  const above = values.filter((value) => value > 0)
  const top = Math.ceil(Math.log10(Math.max(...above, 1)) - 1e-9)
  const least = Math.max(-6, Math.floor(Math.log10(Math.min(...above, 1))))
  const bottom = Math.max(top - 5, Math.min(top - decades, least))
  return Array.from({ length: top - bottom + 1 }, (_, n) => Number((10 ** (bottom + n)).toPrecision(3)))
}

const round = (value: number): string => value.toFixed(1)

/** The line, one path a piece between gaps. */
export function trendPaths(points: readonly TrendPoint[], { x, y }: TrendScale): string[] {
  const known = points.flatMap(({ ms, value }) => (value === null ? [] : [{ ms, value }]))
  return pieces(known, points).map((piece) =>
    piece.map(({ ms, value }, n) => `${n ? 'L' : 'M'}${round(x(ms))} ${round(y(value))}`).join(''),
  )
}

/** The likely band, one closed path a piece. */
export function bandPaths(points: readonly TrendPoint[], { x, y }: TrendScale): string[] {
  const known = points.flatMap(({ ms, from, to }) =>
    from === null || to === null ? [] : [{ ms, value: to, low: from }],
  )
  return pieces(known, points).map((piece) => {
    const upper = piece.map(({ ms, value }) => `${round(x(ms))} ${round(y(value))}`)
    const lower = [...piece].reverse().map(({ ms, low }) => `${round(x(ms))} ${round(y(low))}`)
    return `M${[...upper, ...lower].join('L')}Z`
  })
}

/** Broken where time is missing, and where a window had no figure. */
function pieces<T extends { ms: number; value: number }>(known: readonly T[], all: readonly TrendPoint[]): T[][] {
  const without = all.filter(({ value }) => value === null).map(({ ms }) => ms)
  const byTime = new Map(known.map((point) => [point.ms, point]))
  return unbroken(known, trendGapMs).flatMap((piece) => {
    const parts: T[][] = [[]]
    let before = -Infinity
    for (const { ms } of piece) {
      const point = byTime.get(ms)
      if (!point) continue
      if (without.some((gap) => gap > before && gap < ms) && parts[parts.length - 1].length > 0) parts.push([])
      parts[parts.length - 1].push(point)
      before = ms
    }
    return parts.filter((part) => part.length > 0)
  })
}

/** Since when the newest run of figures comes from a substitute; null where it does not. */
export function substituteSince(points: readonly TrendPoint[]): number | null {
  let since: number | null = null
  for (const point of [...points].reverse()) {
    if (!point.isSubstitute) break
    since = point.ms
  }
  return since
}

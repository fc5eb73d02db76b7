/**
 * The bearing ribbon cut into pieces. What was not measured stays a gap; what is suspect is hatched; each piece of
 * one tone of period and one quality is one polygon.
 */
import type { SeriesPoint } from '../../../../shared/schemas/station.ts'
import { normalise, opposite, turnBetween } from '../../../../shared/directions.ts'
import { periodStep } from './periodTone.ts'

/** One measured vector on the ribbon. */
export interface RibbonPoint {
  /** Hours before now. */
  hoursAgo: number
  /** Bearing the waves come from, unrolled about the ribbon's centre, degrees. */
  from: number
  height: number
  period: number
  spread: number | null
  isSuspect: boolean
}

/** Points newest first; windows without a vector (unresolved, failed, missing) are left out. */
export function ribbonPoints(
  points: readonly SeriesPoint[],
  nowMs: number,
  hours: number,
  centre: number,
): RibbonPoint[] {
  return points
    .flatMap((point): RibbonPoint[] => {
      const hoursAgo = (nowMs - Date.parse(point.at)) / 3_600_000
      const { toward, height, period } = point
      if (!point.resolved || point.qualityFlag === 4 || point.qualityFlag === 9) return []
      if (toward === null || height === null || period === null || hoursAgo < 0 || hoursAgo > hours) return []
      return [
        {
          hoursAgo,
          from: centre + turnBetween(opposite(toward), centre),
          height,
          period,
          spread: point.spread,
          isSuspect: point.qualityFlag === 3,
        },
      ]
    })
    .sort((a, b) => a.hoursAgo - b.hoursAgo)
}

/** Median of an odd or even number of values, the lower one of two. */
const median = (values: readonly number[]): number => [...values].sort((a, b) => a - b)[(values.length - 1) >> 1] ?? 0

/**
 * Stretches without a gap. A gap is more than two and a half times the usual step about it, and more than three
 * minutes; the steps may differ between older and newer points.
 */
export function stretches(points: readonly RibbonPoint[]): RibbonPoint[][] {
  const steps = points.slice(1).map((point, index) => point.hoursAgo - points[index].hoursAgo)
  const found: RibbonPoint[][] = []
  points.forEach((point, index) => {
    const usual = median(steps.slice(Math.max(0, index - 4), index + 3))
    const isGap = index === 0 || steps[index - 1] > Math.max(2.5 * usual, 0.05)
    if (isGap) found.push([point])
    else found[found.length - 1].push(point)
  })
  return found
}

/** A stretch cut where tone or quality changes; neighbours share their border point, so no seam shows. */
export function tonedRuns(stretch: readonly RibbonPoint[]): RibbonPoint[][] {
  const runs: RibbonPoint[][] = []
  for (const point of stretch) {
    const run = runs.at(-1)
    if (!run) {
      runs.push([point])
      continue
    }
    run.push(point)
    const alike = periodStep(run[0].period) === periodStep(point.period) && run[0].isSuspect === point.isSuspect
    if (!alike) runs.push([point])
  }
  return runs.filter((run) => run.length > 1)
}

/**
 * The bearing in the middle of the ribbon, degrees true: the open sea where land sectors are known, else where the waves of the span
 * came from, rounded to 10°, else south.
 */
export function ribbonMiddle(
  landSectors: readonly (readonly [number, number])[],
  points: readonly Pick<SeriesPoint, 'toward' | 'height'>[],
): number {
  if (landSectors.length === 0) return meanFrom(points) ?? 180
  const widths = landSectors.map(([start, end]) => normalise(end - start))
  const [start, end] = landSectors[widths.indexOf(Math.max(...widths))]
  return opposite(start + normalise(end - start) / 2)
}

/** Energy-weighted mean of the bearings the waves came from; null where none was measured. */
function meanFrom(points: readonly Pick<SeriesPoint, 'toward' | 'height'>[]): number | null {
  let east = 0
  let north = 0
  for (const { toward, height } of points) {
    if (toward === null || height === null) continue
    const from = (opposite(toward) * Math.PI) / 180
    east += height * height * Math.sin(from)
    north += height * height * Math.cos(from)
  }
  if (east === 0 && north === 0) return null
  return normalise(360 + Math.round((Math.atan2(east, north) * 18) / Math.PI) * 10)
}

/** Half width of the ribbon in pixels for each metre; wider for a low sea, so that it stays a ribbon. */
export function ribbonScale(points: readonly Pick<SeriesPoint, 'height'>[], isRow: boolean): number {
  const highest = Math.max(0, ...points.map((point) => point.height ?? 0))
  const isLow = highest > 0 && highest < 1
  return isRow ? (isLow ? 9.2 : 5.6) : isLow ? 14 : 8.5
}

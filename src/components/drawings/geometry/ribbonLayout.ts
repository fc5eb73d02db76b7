/** Where things stand on a bearing ribbon: bearing to x, hours ago to y, and the paths of a stretch. */
import { polygon, polyline } from './polar.ts'
import type { Point } from './polar.ts'
import type { RibbonPoint } from './ribbonRuns.ts'

export interface RibbonFrame {
  left: number
  top: number
  width: number
  height: number
  centre: number
  half: number
  hours: number
  /** Half width of the ribbon, pixels a metre. */
  scale: number
}

export const ribbonX = (frame: RibbonFrame, bearing: number): number =>
  frame.left + ((bearing - (frame.centre - frame.half)) / (2 * frame.half)) * frame.width

export const ribbonY = (frame: RibbonFrame, hoursAgo: number): number =>
  frame.top + (hoursAgo / frame.hours) * frame.height

const edge = (frame: RibbonFrame, run: readonly RibbonPoint[], side: -1 | 1): Point[] =>
  run.map((point) => [ribbonX(frame, point.from) + side * point.height * frame.scale, ribbonY(frame, point.hoursAgo)])

/** The filled band of a run. */
export const bandPath = (frame: RibbonFrame, run: readonly RibbonPoint[]): string =>
  polygon([...edge(frame, run, -1), ...edge(frame, run, 1).reverse()])

/** Both edges of a stretch. */
export const edgesPath = (frame: RibbonFrame, run: readonly RibbonPoint[]): string =>
  polyline(edge(frame, run, -1)) + polyline(edge(frame, run, 1))

/** The centre line: the bearing itself. */
export const centrePath = (frame: RibbonFrame, run: readonly RibbonPoint[]): string =>
  polyline(run.map((point) => [ribbonX(frame, point.from), ribbonY(frame, point.hoursAgo)]))

/** A whisker over the directional spread at the point nearest to a full hour; none where nothing was measured. */
export function whiskerPath(frame: RibbonFrame, points: readonly RibbonPoint[], hoursAgo: number): string | null {
  const within = points.filter((point) => Math.abs(point.hoursAgo - hoursAgo) < 0.1 && point.spread !== null)
  const nearest = within.sort((a, b) => Math.abs(a.hoursAgo - hoursAgo) - Math.abs(b.hoursAgo - hoursAgo))[0]
  if (!nearest || nearest.spread === null) return null
  const y = ribbonY(frame, nearest.hoursAgo)
  const from = ribbonX(frame, nearest.from - nearest.spread)
  const to = ribbonX(frame, nearest.from + nearest.spread)
  return (
    polyline([
      [from, y],
      [to, y],
    ]) +
    stroke(from, y) +
    stroke(to, y)
  )
}

const stroke = (x: number, y: number): string =>
  polyline([
    [x, y - 3],
    [x, y + 3],
  ])

/** Full thirties of bearing within the frame, unrolled. */
export function bearingTicks(frame: RibbonFrame): number[] {
  const ticks: number[] = []
  for (
    let bearing = Math.ceil((frame.centre - frame.half) / 30) * 30;
    bearing <= frame.centre + frame.half;
    bearing += 30
  )
    ticks.push(bearing)
  return ticks
}

/** Land sectors as pieces within the frame; a sector may show on both sides. */
export function landPieces(
  frame: RibbonFrame,
  sectors: readonly (readonly [number, number])[],
): { from: number; to: number }[] {
  const lowest = frame.centre - frame.half
  const highest = frame.centre + frame.half
  return sectors.flatMap(([start, end]) => {
    const span = (((end - start) % 360) + 360) % 360
    return [-360, 0, 360].flatMap((turn) => {
      const from = Math.max(start + turn, lowest)
      const to = Math.min(start + turn + span, highest)
      return to > from ? [{ from, to }] : []
    })
  })
}

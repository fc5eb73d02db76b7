/** Where a label stands so that it covers no other label, mark or line: the best of a few places about its point. */
import type { Point } from './polar.ts'

export interface Box {
  x: number
  y: number
  width: number
  height: number
}

export interface LabelWanted {
  at: Point
  width: number
  height: number
  /** Gap between the point and the label. */
  gap: number
}

export interface LabelPlaced {
  box: Box
  anchor: 'start' | 'end' | 'middle'
  /** Where the first line's text starts or ends, and its base line. */
  x: number
  baseline: number
}

export interface Obstacles {
  boxes: Box[]
  segments: [Point, Point][]
  /** Labels stay inside. */
  frame: Box
}

const overlap = (a: Box, b: Box): number =>
  Math.max(0, Math.min(a.x + a.width, b.x + b.width) - Math.max(a.x, b.x)) *
  Math.max(0, Math.min(a.y + a.height, b.y + b.height) - Math.max(a.y, b.y))

/** A thin line from a point to a label that stands away from it; null where the label is near enough to be its own. */
export function leaderTo({ box }: LabelPlaced, [x, y]: Point): [Point, Point] | null {
  const near: Point = [
    Math.min(box.x + box.width, Math.max(box.x, x)),
    Math.min(box.y + box.height, Math.max(box.y, y)),
  ]
  const distance = Math.hypot(near[0] - x, near[1] - y)
  if (distance < 28) return null
  const start = 9 / distance
  return [[x + (near[0] - x) * start, y + (near[1] - y) * start], near]
}

/** Length of a segment inside a box, by sampling. */
function within([a, b]: [Point, Point], box: Box): number {
  const samples = 24
  let inside = 0
  for (let step = 0; step <= samples; step++) {
    const x = a[0] + ((b[0] - a[0]) * step) / samples
    const y = a[1] + ((b[1] - a[1]) * step) / samples
    if (x >= box.x && x <= box.x + box.width && y >= box.y && y <= box.y + box.height) inside++
  }
  return (inside / samples) * Math.hypot(b[0] - a[0], b[1] - a[1])
}

function cost(box: Box, obstacles: Obstacles): number {
  const covered = obstacles.boxes.reduce((sum, other) => sum + overlap(box, other), 0)
  const crossed = obstacles.segments.reduce((sum, segment) => sum + within(segment, box), 0)
  const outside = box.width * box.height - overlap(box, obstacles.frame)
  return covered * 3 + crossed * 12 + outside * 10
}

/** Places labels one after the other; each becomes an obstacle for the next. */
export function placeLabels(wanted: readonly LabelWanted[], obstacles: Obstacles): LabelPlaced[] {
  const boxes = [...obstacles.boxes]
  return wanted.map((label) => {
    const best = candidates(label)
      .map((candidate, rank) => ({ candidate, worth: cost(candidate.box, { ...obstacles, boxes }) + rank }))
      .sort((a, b) => a.worth - b.worth)[0].candidate
    boxes.push(best.box)
    return best
  })
}

function candidates({ at: [x, y], width, height, gap }: LabelWanted): LabelPlaced[] {
  const place = (dx: number, dy: number, anchor: LabelPlaced['anchor']): LabelPlaced => {
    const left = anchor === 'start' ? x + dx : anchor === 'end' ? x + dx - width : x + dx - width / 2
    const top = y + dy - height / 2
    return { box: { x: left, y: top, width, height }, anchor, x: x + dx, baseline: top + 11 }
  }
  const level = height / 2 + gap
  const spots: LabelPlaced[] = []
  for (const reach of [1, 2, 3.2]) {
    spots.push(
      place(gap * reach, level * reach, 'start'),
      place(gap * reach, -level * reach, 'start'),
      place(-gap * reach, level * reach, 'end'),
      place(-gap * reach, -level * reach, 'end'),
      place(gap * 1.6 * reach, 0, 'start'),
      place(-gap * 1.6 * reach, 0, 'end'),
      place(0, level * 1.2 * reach, 'middle'),
      place(0, -level * 1.2 * reach, 'middle'),
    )
  }
  return spots
}

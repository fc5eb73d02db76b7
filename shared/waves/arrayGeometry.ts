/**
 * The array's own frame: centroid, principal axes, sensors ordered by position. The fit works in it, so that neither the
 * axes of the survey nor the numbering of the sensors touch the answer.
 */

export interface Position {
  east: number
  north: number
}

export interface ArrayFrame {
  /** Index of the sensor in the caller's list, in the frame's own order. */
  order: number[]
  /** Positions along the frame's axes, in the frame's order, m. */
  x: Float64Array
  y: Float64Array
  /** Angle of the frame's x axis, radians anticlockwise from east. */
  axis: number
  /** Longest baseline, m. */
  aperture: number
  /** Narrow over long principal axis, 0 (a line) to 1. */
  axisRatio: number
}

/** Below this ratio of the principal axes the sensors stand on a line: left and right cannot be told apart. */
export const leastAxisRatio = 0.05

/** Errors: none; an empty list gives an empty frame with aperture 0. */
export function arrayFrame(positions: readonly Position[]): ArrayFrame {
  const count = positions.length
  const meanEast = positions.reduce((sum, p) => sum + p.east, 0) / Math.max(1, count)
  const meanNorth = positions.reduce((sum, p) => sum + p.north, 0) / Math.max(1, count)
  let ee = 0
  let nn = 0
  let en = 0
  for (const p of positions) {
    ee += (p.east - meanEast) ** 2
    nn += (p.north - meanNorth) ** 2
    en += (p.east - meanEast) * (p.north - meanNorth)
  }
  const half = Math.hypot((ee - nn) / 2, en)
  const long = (ee + nn) / 2 + half
  const short = Math.max(0, (ee + nn) / 2 - half)
  // Square and pentagon have no principal axis: the farthest sensor then gives the direction.
  const axis = half > 1e-6 * long ? 0.5 * Math.atan2(2 * en, ee - nn) : farthestBearing(positions, meanEast, meanNorth)
  const cos = Math.cos(axis)
  const sin = Math.sin(axis)
  const placed = positions.map((p, index) => ({
    index,
    x: (p.east - meanEast) * cos + (p.north - meanNorth) * sin,
    y: (p.north - meanNorth) * cos - (p.east - meanEast) * sin,
  }))
  placed.sort((a, b) => a.x - b.x || a.y - b.y)
  let aperture = 0
  for (const a of placed) for (const b of placed) aperture = Math.max(aperture, Math.hypot(a.x - b.x, a.y - b.y))
  return {
    order: placed.map((p) => p.index),
    x: Float64Array.from(placed, (p) => p.x),
    y: Float64Array.from(placed, (p) => p.y),
    axis,
    aperture,
    axisRatio: long > 0 ? Math.sqrt(short / long) : 0,
  }
}

function farthestBearing(positions: readonly Position[], meanEast: number, meanNorth: number): number {
  let farthest = -1
  let bearing = 0
  for (const p of positions) {
    const distance = Math.hypot(p.east - meanEast, p.north - meanNorth)
    if (distance <= farthest * (1 + 1e-9)) continue
    farthest = distance
    bearing = Math.atan2(p.north - meanNorth, p.east - meanEast)
  }
  return bearing
}

/** The border of a square plan stands for the horizon: each bearing has its point on it. */
import { polygon } from './polar.ts'
import type { Point } from './polar.ts'

const radians = Math.PI / 180

/** The point where a bearing from the centre meets the square of the given half side. */
export function borderPoint(centre: number, halfSide: number, bearing: number): Point {
  const east = Math.sin(bearing * radians)
  const south = -Math.cos(bearing * radians)
  const reach = halfSide / Math.max(Math.abs(east), Math.abs(south))
  return [centre + east * reach, centre + south * reach]
}

/** Path of the band between two squares over the bearings from `start` clockwise to `end`; corners are followed. */
export function borderSector(centre: number, inner: number, outer: number, start: number, end: number): string {
  const span = (((end - start) % 360) + 360) % 360
  const bearings: number[] = [start]
  for (let step = 1; step < span; step++) bearings.push(start + step)
  for (const corner of [45, 135, 225, 315]) {
    const along = (((corner - start) % 360) + 360) % 360
    if (along > 0 && along < span) bearings.push(start + along)
  }
  bearings.push(start + span)
  bearings.sort((a, b) => a - b)
  const outside = bearings.map((bearing) => borderPoint(centre, outer, bearing))
  const inside = bearings.map((bearing) => borderPoint(centre, inner, bearing)).reverse()
  return polygon([...outside, ...inside])
}

/** The crest plan: a square of about twice the array's aperture, north up, and the crests that cross it. */
import { niceLength } from './planFrame.ts'
import { polar, segment } from './polar.ts'
import type { Point } from './polar.ts'

export interface PlannedSensor {
  name: string
  /** Metres, true north. */
  east: number
  north: number
  isUsed: boolean
}

export interface SquarePlan {
  /** Middle of the drawing, both ways. */
  centre: number
  /** Half sides of the plan and of the border band's outer edge. */
  inner: number
  outer: number
  /** Drawing units a metre. */
  scale: number
  side: number
  /** Grid and bar, m. */
  grid: number
  project: (east: number, north: number) => Point
}

/** Greatest distance between two sensors, m. */
export function aperture(sensors: readonly Pick<PlannedSensor, 'east' | 'north'>[]): number {
  let greatest = 0
  for (const a of sensors)
    for (const b of sensors) greatest = Math.max(greatest, Math.hypot(a.east - b.east, a.north - b.north))
  return greatest
}

/** `spacing` of the crests, m: a small array is drawn on at least half of it, or crests would rarely be seen. */
export function squarePlan(
  sensors: readonly PlannedSensor[],
  size: number,
  spacing = 0,
  margin = 30,
  band = 20,
): SquarePlan {
  const side = Math.max(10, 2.05 * aperture(sensors), 0.5 * spacing)
  const centre = size / 2
  const outer = centre - margin
  const inner = outer - band
  const scale = (2 * inner) / side
  const middle = {
    east: sensors.reduce((sum, sensor) => sum + sensor.east, 0) / Math.max(1, sensors.length),
    north: sensors.reduce((sum, sensor) => sum + sensor.north, 0) / Math.max(1, sensors.length),
  }
  return {
    centre,
    inner,
    outer,
    scale,
    side,
    grid: niceLength(side * 0.3),
    project: (east, north) => [centre + (east - middle.east) * scale, centre - (north - middle.north) * scale],
  }
}

/** Grid lines through the centroid, as one path. */
export function gridPath({ centre, inner, scale, grid, side }: SquarePlan): string {
  const most = Math.floor(side / 2 / grid)
  let path = ''
  for (let step = -most; step <= most; step++) {
    const at = centre + step * grid * scale
    path += segment([at, centre - inner], [at, centre + inner]) + segment([centre - inner, at], [centre + inner, at])
  }
  return path
}

/** Opacity of a crest and of the four thin lines behind it, by which a still picture shows where it goes. */
export const trailOpacities = [1, 0.5, 0.36, 0.24, 0.14]

/**
 * Crest lines about the centre, one path for each place in the trail. The crests stand `ahead` metres past the
 * centroid; shifting them by one spacing along the heading gives the same picture again.
 */
export function crestTrail(plan: SquarePlan, toward: number, spacing: number, ahead: number): string[] {
  const step = spacing * plan.scale
  const reach = plan.inner * 1.5
  const most = Math.ceil(reach / step) + 1
  return trailOpacities.map((_, place) => {
    let path = ''
    for (let n = -most; n <= most; n++) {
      const middle = polar(plan.centre, plan.centre, toward, ahead * plan.scale + (n - place * 0.045) * step)
      path += segment(polar(...middle, toward - 90, reach), polar(...middle, toward + 90, reach))
    }
    return path
  })
}

/** Where the crests stand in a still picture: within the plan, past the vector's foot. */
export const stillAhead = (plan: SquarePlan, spacing: number): number => Math.min(0.35 * spacing, 0.25 * plan.side)

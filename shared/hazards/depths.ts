/**
 * Tide in every depth: depth = level of the water − level of the bed, both above the same datum. Where the level is not known nothing is
 * put in its place here: that is for whoever asks, and must be said.
 */
import { together } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

/** A sounding on the way from the station to the place. */
export interface Sounding {
  /** Along the path from the station, m. */
  distance: number
  /** Level of the bed above datum, m: negative below it. */
  bedLevel: number
  /** One standard deviation of the sounding, m; null where the survey says none. */
  sd: number | null
}

/** Depth of still water, m; null where the bed is dry. ± of level and bed together. */
export function depthNow(level: Uncertain, bed: Uncertain): Uncertain | null {
  const value = level.value - bed.value
  return value > 0 ? { value, sd: together(level.sd, bed.sd) } : null
}

export interface PathDepth {
  distance: number
  depth: number
}

/** Depths along a sounded path at this level; null from the first dry sounding on means that the path is cut there. */
export function pathDepths(path: readonly Sounding[], level: number): PathDepth[] | null {
  const depths = path.map(({ distance, bedLevel }) => ({ distance, depth: level - bedLevel }))
  return depths.every(({ depth }) => depth > 0) ? depths : null
}

/**
 * Errors of a path as people enter it: RangeError naming the sounding for fewer than two, distances that do not rise or values that are
 * no numbers.
 */
export function checkPath(path: readonly Sounding[]): void {
  if (path.length < 2) throw new RangeError(`a path needs two soundings or more, not ${path.length}`)
  path.forEach(({ distance, bedLevel }, index) => {
    if (!Number.isFinite(distance) || !Number.isFinite(bedLevel))
      throw new RangeError(`sounding ${index + 1} has no distance or no level`)
    if (index > 0 && distance <= path[index - 1].distance)
      throw new RangeError(`sounding ${index + 1} is not further along than the one before`)
  })
}

/** Depth at a distance, straight lines between soundings, m; the ends are held beyond them. */
export function depthAt(path: readonly PathDepth[], distance: number): number {
  const last = path[path.length - 1]
  if (distance >= last.distance) return last.depth
  const next = path.findIndex((point) => point.distance > distance)
  if (next <= 0) return path[0].depth
  const [a, b] = [path[next - 1], path[next]]
  return a.depth + ((b.depth - a.depth) * (distance - a.distance)) / (b.distance - a.distance)
}

/**
 * What of a sea runs toward a shore: energies of the systems with an onshore component added, with the period and the angle of the
 * highest of them. For the formulas of beaches, which know one train.
 */
import { incidenceAngle } from './refraction.ts'
import type { Sea, SeaSystem } from './sea.ts'
import type { ShorewardSea } from './breakers.ts'
import { propagate } from './uncertain.ts'

export interface Shoreward extends ShorewardSea {
  /** Its system: the highest that runs toward the shore. */
  leading: SeaSystem
  /** Names of all that went in. */
  systems: string[]
}

/**
 * @param seaward shore normal pointing out to sea, rad from east
 * @param depthSd one standard deviation of the sea's depth, m
 * Null where no system runs toward the shore.
 */
export function shorewardSea(sea: Sea, seaward: number, depthSd: number | null): Shoreward | null {
  const onshore = sea.systems.filter(({ heading }) => Math.abs(incidenceAngle(heading.value, seaward)) < Math.PI / 2)
  const leading = onshore.at(0)
  if (!leading) return null
  const heights = onshore.map(({ height }) => height)
  const sum = (values: number[]): number => Math.sqrt(values.reduce((all, one) => all + one * one, 0))
  return {
    height: { value: sum(heights.map(({ value }) => value)), sd: propagate(heights, sum) },
    period: leading.period,
    incidence: { value: incidenceAngle(leading.heading.value, seaward), sd: leading.heading.sd },
    depth: { value: sea.depth, sd: depthSd },
    leading,
    systems: onshore.map(({ name }) => name),
  }
}

/** Names and signs of wave systems, the same on every page: a system keeps its sign as long as it is tracked. */
import type { WaveSystem } from './schemas/estimate.ts'
import { normalise } from './directions.ts'

/** The sign of a system: 1 solid line and head, 2 long dash and open head (second swell), 3 short dash and barbs (wind sea). */
export type SystemSign = 1 | 2 | 3

type Named = Pick<WaveSystem, 'key' | 'name' | 'from'>

const winds = ['North', 'North-east', 'East', 'South-east', 'South', 'South-west', 'West', 'North-west']

/** Sign by what the system is and, among swells, by how long it has been known (keys are given in order of appearance). */
export function systemSign(system: Named, all: readonly Named[]): SystemSign {
  if (system.name === 'wind sea') return 3
  return all.some((other) => other.name === 'swell' && other.key < system.key) ? 2 : 1
}

/** `Swell`, `Wind sea`; where two have the same name, by the quarter they come from: `West swell`. */
export function systemTitle(system: Named, all: readonly Named[]): string {
  const namesakes = all.filter((other) => other.name === system.name)
  if (namesakes.length < 2) return system.name === 'swell' ? 'Swell' : 'Wind sea'
  const quarter = (one: Named): string => winds[Math.round(normalise(one.from) / 45) % 8]
  const title = `${quarter(system)} ${system.name}`
  const alike = namesakes.filter((other) => quarter(other) === quarter(system)).sort((a, b) => a.key - b.key)
  return alike.length < 2 ? title : `${title} ${alike.findIndex((other) => other.key === system.key) + 1}`
}

/** Share of the first system's height from which a second one counts as its equal, so that none leads. */
export const equalShare = 0.8

/** True when the second highest system has at least `equalShare` of the highest one's height. */
export const areEqual = (systems: readonly Pick<WaveSystem, 'significantWaveHeight'>[]): boolean =>
  systems.length > 1 && systems[1].significantWaveHeight >= equalShare * systems[0].significantWaveHeight

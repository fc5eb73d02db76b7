/**
 * From which side a sea meets a course, in words. Sectors of 45° about the bow, the beams, the quarters and the stern, of the bearing the
 * waves come from against the course: within 22.5° of the bow "ahead", within 22.5° of the stern "astern".
 */
import { degreesTrue, opposite, turnBetween } from '../directions.ts'
import type { SeaPart } from './crossSea.ts'
import type { SeaSystem } from './sea.ts'

export type Sector = 'ahead' | 'bow' | 'beam' | 'quarter' | 'astern'
export type Side = 'port' | 'starboard'

export interface SystemSide {
  key: number
  name: string
  sector: Sector
  /** The side the waves come from; null ahead and astern of the course, within two standard deviations of the heading or 3°. */
  from: Side | null
  /** The side they set a vessel to; null as above. */
  setsTo: Side | null
  /** Bearing the waves come from against the course, rad, −π to π, positive to starboard. */
  relativeBearing: number
  /** "from the port quarter, setting to starboard" */
  words: string
}

/** Closer to the course than this the side is not told apart, degrees. */
const leastAngle = 3
/** A system with less of the energy across than this does not make "from both sides". */
const leastShare = 0.1

/** @param course heading of the vessel or of the channel, rad from east */
export function systemSide(system: Pick<SeaSystem, 'key' | 'name' | 'heading'>, course: number): SystemSide {
  const relative = turnBetween(opposite(degreesTrue(system.heading.value)), degreesTrue(course))
  const off = Math.abs(relative)
  const sector: Sector =
    off < 22.5 ? 'ahead' : off < 67.5 ? 'bow' : off <= 112.5 ? 'beam' : off <= 157.5 ? 'quarter' : 'astern'
  const unsure = Math.max(leastAngle, (2 * (system.heading.sd ?? 0) * 180) / Math.PI)
  const from = Math.min(off, 180 - off) < unsure ? null : relative > 0 ? 'starboard' : 'port'
  const setsTo = from === null ? null : from === 'port' ? 'starboard' : 'port'
  const relativeBearing = (relative * Math.PI) / 180
  return {
    ...{ key: system.key, name: system.name, sector, from, setsTo, relativeBearing },
    words: wordsOf(sector, from, setsTo),
  }
}

function wordsOf(sector: Sector, from: Side | null, setsTo: Side | null): string {
  if (from === null) return sector === 'ahead' || sector === 'astern' ? `from ${sector}` : `from the ${sector}`
  const whence =
    sector === 'ahead' || sector === 'astern' ? `from ${sector}, on the ${from} side` : `from the ${from} ${sector}`
  return `${whence}, setting to ${setsTo}`
}

export interface SeaSides {
  systems: SystemSide[]
  /** All that count set to the same side: the words of the leading one across; else "from both sides". Null without systems. */
  words: string | null
  /** Side all that count set to; null where they differ or none is told. */
  setsTo: Side | null
}

/** `parts` of the cross-sea on the same axis say which systems count and which leads. */
export function seaSides(systems: SeaSystem[], parts: SeaPart[], course: number): SeaSides {
  const sides = systems.map((system) => systemSide(system, course))
  const counting = parts
    .filter(({ key, acrossShare }) => key !== null && acrossShare >= leastShare)
    .flatMap(({ key }) => sides.filter((side) => side.key === key))
  const told = counting.filter(({ setsTo }) => setsTo !== null)
  if (sides.length === 0) return { systems: sides, words: null, setsTo: null }
  if (told.some(({ setsTo }) => setsTo !== told[0].setsTo))
    return { systems: sides, words: 'from both sides', setsTo: null }
  const leading = told[0] ?? counting[0] ?? sides[0]
  return { systems: sides, words: leading.words, setsTo: told[0]?.setsTo ?? null }
}

/** Does the sea meet the bow or follow? By the system with most energy along the course. */
export function headOrFollowing(
  systems: SeaSystem[],
  parts: SeaPart[],
  course: number,
): 'head sea' | 'following' | null {
  const leading = [...parts].filter(({ key }) => key !== null).sort((a, b) => b.along - a.along)[0]
  const system = systems.find(({ key }) => key === leading?.key)
  return system ? (Math.cos(system.heading.value - course) < 0 ? 'head sea' : 'following') : null
}

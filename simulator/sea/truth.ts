/** What the sea really was: the truth behind the readings, averaged as an estimate of the same span would be. */
import { degreesTrue, radiansFromEast } from '../../shared/directions.ts'
import type { Fault, Scenario } from '../scenarios/scenario.ts'
import { depthAt, totalHeight, type NearshoreSystem, type Site } from './nearshore.ts'
import { blocksAt } from './stationSea.ts'

export interface TrueSystem {
  name: 'swell' | 'wind sea'
  significantWaveHeight: number
  peakPeriod: number
  /** Degrees true. */
  from: number
  toward: number
  directionalSpread: number
  phaseSpeed: number
}

export interface Truth {
  waterDepth: number
  significantWaveHeight: number
  surgeHeight: number
  /** Highest first. */
  systems: TrueSystem[]
}

interface Seen {
  scenario: Scenario
  anchor: number
  site: Site
}

/** Mean over `seconds` ending at `time` (ms since 1970), energy weighted; the moment itself for 0. */
export function truthAt(seen: Seen, time: number, seconds = 0): Truth {
  const moments = seconds > 0 ? Math.max(1, Math.round(seconds / 10)) : 1
  const sums = new Map<string, ReturnType<typeof emptySum>>()
  let depth = 0
  let surge = 0
  for (let n = 0; n < moments; n++) {
    const moment = time - (seconds * 1000 * (n + (seconds > 0 ? 0.5 : 0))) / moments
    depth += depthAt(seen.site, moment) / moments
    for (const { state, share } of blocksAt(seen, moment)) {
      surge += (share * state.surgeHeight ** 2) / moments
      for (const system of state.systems) addTo(sums, system, share / moments)
    }
  }
  const systems = [...sums.values()].map(meanSystem).sort((a, b) => b.significantWaveHeight - a.significantWaveHeight)
  return { waterDepth: depth, significantWaveHeight: totalHeight(systems), surgeHeight: Math.sqrt(surge), systems }
}

const emptySum = (name: TrueSystem['name']) => ({ name, energy: 0, period: 0, east: 0, north: 0, spread: 0, speed: 0 })

function addTo(sums: Map<string, ReturnType<typeof emptySum>>, system: NearshoreSystem, share: number): void {
  const sum = sums.get(system.key) ?? emptySum(system.name)
  sums.set(system.key, sum)
  const energy = share * system.significantWaveHeight ** 2
  const heading = radiansFromEast(system.toward)
  sum.energy += energy
  sum.period += energy * system.peakPeriod
  sum.east += energy * Math.cos(heading)
  sum.north += energy * Math.sin(heading)
  sum.spread += energy * system.directionalSpread
  sum.speed += energy * system.phaseSpeed
}

function meanSystem(sum: ReturnType<typeof emptySum>): TrueSystem {
  const toward = degreesTrue(Math.atan2(sum.north, sum.east))
  return {
    name: sum.name,
    significantWaveHeight: Math.sqrt(sum.energy),
    peakPeriod: sum.period / sum.energy,
    from: (toward + 180) % 360,
    toward,
    directionalSpread: sum.spread / sum.energy,
    phaseSpeed: sum.speed / sum.energy,
  }
}

/** Faults that act at a time: all begin at the anchor. */
export const faultsAt = (seen: Seen, time: number): Fault[] => (time >= seen.anchor ? (seen.scenario.faults ?? []) : [])

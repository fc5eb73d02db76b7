/**
 * From the sea outside to the sea at a station: the coast turns waves toward its normal and takes some of their
 * height, each station in its own measure (invented, of the size that refraction gives), and the depth limits them.
 */
import { phaseSpeed } from '../../shared/waves/dispersion.ts'
import { normalise, opposite, turnBetween } from '../../shared/directions.ts'
import type { OffshoreSystem, Scenario } from '../scenarios/scenario.ts'
import { tideLevel } from '../../shared/demonstration/tide.ts'

export interface NearshoreSystem {
  key: string
  name: 'swell' | 'wind sea'
  significantWaveHeight: number
  peakPeriod: number
  /** Degrees true. */
  toward: number
  directionalSpread: number
  peakedness: number
  /** Linear theory at the peak period and the depth then, m/s. */
  phaseSpeed: number
}

export interface SeaState {
  /** Milliseconds since 1970 UTC. */
  time: number
  /** Still water depth with tide, m. */
  waterDepth: number
  systems: NearshoreSystem[]
  /** Height 4√m0 of the long waves that groups of waves send ahead (0.004 to 0.03 Hz), m. */
  surgeHeight: number
}

export interface Site {
  code: string
  /** Below datum, m. */
  waterDepth: number
}

interface Exposure {
  /** Share that is left of a wave's angle to the coast's normal. */
  angleKept: number
  heightKept: number
}

/** Where waves come straight in from, degrees true. */
const coastNormal = 240
const exposures: Record<string, Exposure> = {
  OL: { angleKept: 1, heightKept: 1 },
  FW: { angleKept: 0.84, heightKept: 0.93 },
  PB: { angleKept: 0.66, heightKept: 0.82 },
}
const openSea: Exposure = { angleKept: 1, heightKept: 1 }

/** Significant height passes no larger share of the depth. */
const greatestShareOfDepth = 0.5

export const depthAt = (site: Site, time: number): number => site.waterDepth + tideLevel(time)

export function seaStateAt(scenario: Scenario, anchor: number, site: Site, time: number): SeaState {
  const waterDepth = depthAt(site, time)
  const offshore = scenario.systems((time - anchor) / 3_600_000)
  const exposure = exposures[site.code] ?? openSea
  const height = Math.hypot(...offshore.map((system) => system.significantWaveHeight)) * exposure.heightKept
  const limit = Math.min(1, (greatestShareOfDepth * waterDepth) / height)
  const systems = offshore.map((system) => bringAshore(system, exposure, limit, waterDepth))
  return { time, waterDepth, systems, surgeHeight: surgeOf(systems) }
}

function bringAshore(system: OffshoreSystem, exposure: Exposure, limit: number, waterDepth: number): NearshoreSystem {
  const from = normalise(coastNormal + exposure.angleKept * turnBetween(system.from, coastNormal))
  return {
    key: system.key,
    name: system.name,
    significantWaveHeight: system.significantWaveHeight * exposure.heightKept * limit,
    peakPeriod: system.peakPeriod,
    toward: opposite(from),
    directionalSpread: system.directionalSpread,
    peakedness: system.peakedness,
    phaseSpeed: phaseSpeed(system.peakPeriod, waterDepth),
  }
}

/** Grows with the square of the height and with the period, as bound and freed long waves do. */
function surgeOf(systems: NearshoreSystem[]): number {
  let sum = 0
  for (const { significantWaveHeight, peakPeriod } of systems) {
    sum += 0.018 * significantWaveHeight ** 2 * (peakPeriod / 12) ** 2
  }
  return sum
}

export const totalHeight = (systems: { significantWaveHeight: number }[]): number =>
  Math.hypot(...systems.map((system) => system.significantWaveHeight))

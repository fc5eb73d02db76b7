/**
 * The sea as the functions of places take it: SI units, headings in radians anticlockwise from east (as inside `shared/waves`), pointing
 * where the waves go. Made from an estimate at the edge, once.
 */
import { radiansFromEast } from '../directions.ts'
import type { EstimateResult } from '../schemas/estimate.ts'
import type { Uncertain } from './uncertain.ts'

export interface SeaSystem {
  /** The tracker's identity of the system. */
  key: number
  name: string
  /** Significant height, m. */
  height: Uncertain
  /** Peak period, s. Its ± is taken as 3 %, about one group of frequencies of the estimate. */
  period: Uncertain
  /** rad */
  heading: Uncertain
  /** √(2(1−m₁)), rad; null where the array cannot tell. */
  spread: number | null
  /** Frequencies that belong to it, Hz. */
  band: { from: number; to: number }
}

/** Energy by frequency and heading. */
export interface DirectionalDensity {
  method: string
  converged: boolean
  /** Hz, rising. */
  frequency: number[]
  /** rad, evenly around the circle. */
  heading: number[]
  /** By frequency, then heading, m²/Hz/rad. */
  density: number[][]
}

export interface Sea {
  /** Significant height of all systems together, m. */
  height: Uncertain
  /** s; null where the estimate has none. */
  peakPeriod: Uncertain | null
  meanPeriod: Uncertain | null
  energyPeriod: Uncertain | null
  /** Highest first. */
  systems: SeaSystem[]
  directional: DirectionalDensity | null
  /** Depth of still water where it was measured, m. */
  depth: number
}

/** Share of a period taken as its standard deviation: half the usual step between groups of frequencies. */
export const periodSdShare = 0.03

const degree = Math.PI / 180
const period = (value: number | null): Uncertain | null =>
  value === null ? null : { value, sd: periodSdShare * value }

export type SeaEstimate = Pick<
  EstimateResult,
  | 'significantWaveHeight'
  | 'significantWaveHeightSd'
  | 'peakPeriod'
  | 'meanPeriod'
  | 'energyPeriod'
  | 'systems'
  | 'directionalSpectrum'
  | 'waterDepth'
>

/** Null where the estimate has no height: then nothing can be said of any place. */
export function seaOf(estimate: SeaEstimate): Sea | null {
  const { significantWaveHeight: height, directionalSpectrum: found } = estimate
  if (height === null) return null
  return {
    height: { value: height, sd: estimate.significantWaveHeightSd },
    peakPeriod: period(estimate.peakPeriod),
    meanPeriod: period(estimate.meanPeriod),
    energyPeriod: period(estimate.energyPeriod),
    systems: estimate.systems.map((system) => ({
      key: system.key,
      name: system.name,
      height: { value: system.significantWaveHeight, sd: system.significantWaveHeightSd },
      period: { value: system.peakPeriod, sd: periodSdShare * system.peakPeriod },
      heading: { value: radiansFromEast(system.toward), sd: system.headingSd * degree },
      spread: system.directionalSpread === null ? null : system.directionalSpread * degree,
      band: system.band,
    })),
    directional: found && {
      method: found.method,
      converged: found.converged,
      frequency: found.frequency,
      heading: found.directions.map(radiansFromEast),
      density: found.density.map((row) => row.map((perDegree) => perDegree / degree)),
    },
    depth: estimate.waterDepth,
  }
}

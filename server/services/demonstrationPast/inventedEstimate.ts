/**
 * The estimate that an array would have made of a past sea state: the truth, off by errors of the size that twenty
 * minutes of a random sea bring. Moments and sampling errors are those of JONSWAP with γ = 3.3 (Hasselmann et al. 1973),
 * the scatter of headings after Kuik, van Vledder & Holthuijsen (1988).
 */
import type { PastSeaState } from '../../../shared/demonstration/past.ts'
import { normalise, radiansFromEast } from '../../../shared/directions.ts'
import type { EstimateResult, WaveSystem } from '../../../shared/schemas/estimate.ts'
import { groupSpeed } from '../../../shared/waves/dispersion.ts'
import { hashName, windowError } from './chance.ts'

/** Of H_m0 over 20 min at a peak period of 10 s; it grows with the square root of the period. */
const heightVariation = 0.056
/** Degrees of freedom of the energetic band, 20 min at 10 s. */
const degreesOfFreedom = 100
const speedVariation = 0.006
const periodVariation = 0.02
const spreadVariation = 0.06
/** T_m02 and T_m−1,0 as shares of the peak period. */
const zeroCrossingShare = 0.778
const energyShare = 0.903

const gravity = 9.81
const waterDensity = 1025

export type InventedFigures = Pick<
  EstimateResult,
  'resolved' | 'reason' | 'qualityFlag' | 'completeness' | 'waterDepth' | 'waterDepthSource' | 'systems'
> &
  Together

/** `name` seeds the errors: one a station. */
export function inventEstimate(name: string, state: PastSeaState): InventedFigures {
  const minute = Math.round(Date.parse(state.at) / 60_000)
  const systems = state.systems
    .map((system) => inventSystem(`${name}/${system.name}`, system, minute))
    .sort((a, b) => b.significantWaveHeight - a.significantWaveHeight)
    .map((system, index) => ({ ...system, key: index + 1 }))
  return {
    resolved: systems.length > 0,
    reason: systems.length > 0 ? null : 'no-resolvable-wave',
    qualityFlag: 1,
    completeness: 1,
    waterDepth: state.waterDepth,
    waterDepthSource: 'level',
    ...together(systems, state.waterDepth),
    systems,
  }
}

type SystemState = PastSeaState['systems'][number]

function inventSystem(name: string, state: SystemState, minute: number): WaveSystem {
  const error = (quantity: string) => windowError(hashName(`${name}/${quantity}`), minute)
  const longer = Math.sqrt(state.peakPeriod / 10)
  const heightSd = state.significantWaveHeight * heightVariation * longer
  const headingSd = headingScatter(state.directionalSpread) * longer
  const speedSd = state.phaseSpeed * speedVariation * longer
  const toward = normalise(state.toward + headingSd * error('heading'))
  const speed = state.phaseSpeed + speedSd * error('speed')
  const directionalSpread = state.directionalSpread * (1 + spreadVariation * error('spread'))
  const significantWaveHeight = state.significantWaveHeight + heightSd * error('height')
  return {
    key: 1,
    name: state.name,
    significantWaveHeight,
    significantWaveHeightSd: heightSd,
    peakPeriod: state.peakPeriod * (1 + periodVariation * longer * error('period')),
    from: normalise(toward + 180),
    toward,
    headingSd,
    measuredSpeed: speed / firstMoment(directionalSpread),
    speed,
    speedSd,
    linearSpeed: state.phaseSpeed,
    speedRatio: speed / state.phaseSpeed,
    directionalSpread,
    ...slowness(toward, speed, headingSd, speedSd),
    band: { from: 0.7 / state.peakPeriod, to: 2 / state.peakPeriod },
  }
}

/** m1 = 1 − σ²/2 of a spread σ = √(2(1 − m1)). */
const firstMoment = (spreadDegrees: number): number => 1 - (spreadDegrees * Math.PI) ** 2 / (2 * 180 ** 2)

/** √((1 − m2)/2) / (m1 √ν) in degrees, with m2 of cos^2s. */
function headingScatter(spreadDegrees: number): number {
  const m1 = firstMoment(spreadDegrees)
  const s = m1 / (1 - m1)
  const m2 = (s * (s - 1)) / ((s + 1) * (s + 2))
  return ((180 / Math.PI) * Math.sqrt((1 - m2) / 2)) / (m1 * Math.sqrt(degreesOfFreedom))
}

/** The vector s = u / c and its covariance, along the wave sd(c)/c², across it sd(θ)/c. */
function slowness(toward: number, speed: number, headingSd: number, speedSd: number) {
  const heading = radiansFromEast(toward)
  const [c, s] = [Math.cos(heading), Math.sin(heading)]
  const along = (speedSd / speed ** 2) ** 2
  const across = ((headingSd * Math.PI) / 180 / speed) ** 2
  return {
    slownessEast: c / speed,
    slownessNorth: s / speed,
    slownessCovariance: {
      eastEast: along * c * c + across * s * s,
      eastNorth: (along - across) * c * s,
      northNorth: along * s * s + across * c * c,
    },
  }
}

type Together = Pick<
  EstimateResult,
  'significantWaveHeight' | 'significantWaveHeightSd' | 'peakPeriod' | 'meanPeriod' | 'energyPeriod' | 'energyFlux'
>

/** All systems as one sea: moments add. The peak is the system's with the highest density, H² T. */
function together(systems: WaveSystem[], waterDepth: number): Together {
  let [m0, m2, inverse, flux, variance, densest] = [0, 0, 0, 0, 0, 0]
  let peakPeriod: number | null = null
  for (const { significantWaveHeight, significantWaveHeightSd, peakPeriod: period } of systems) {
    const energy = significantWaveHeight ** 2 / 16
    m0 += energy
    m2 += energy / (zeroCrossingShare * period) ** 2
    inverse += energy * energyShare * period
    flux += waterDensity * gravity * energy * groupSpeed(energyShare * period, waterDepth)
    variance += (significantWaveHeight * (significantWaveHeightSd ?? 0)) ** 2
    if (energy * period > densest) [densest, peakPeriod] = [energy * period, period]
  }
  if (m0 === 0) return nothing
  const significantWaveHeight = 4 * Math.sqrt(m0)
  return {
    significantWaveHeight,
    significantWaveHeightSd: Math.sqrt(variance) / significantWaveHeight,
    peakPeriod,
    meanPeriod: Math.sqrt(m0 / m2),
    energyPeriod: inverse / m0,
    energyFlux: flux,
  }
}

const nothing: Together = {
  significantWaveHeight: null,
  significantWaveHeightSd: null,
  peakPeriod: null,
  meanPeriod: null,
  energyPeriod: null,
  energyFlux: null,
}

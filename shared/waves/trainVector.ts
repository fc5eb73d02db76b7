/** One train of waves as the estimate says it, from its vector in the array's frame. */
import { degreesTrue, opposite } from '../directions.ts'
import type { WaveSystem } from '../schemas/estimate.ts'
import { phaseSpeed } from './dispersion.ts'
import { systemName } from './windSea.ts'

/** A train in the array's own frame; variances of one standard deviation squared. */
export interface TrainVector {
  /** Radians of travel. */
  direction: number
  /** m/s. */
  speed: number
  /** m/s, as plain lags say. */
  measuredSpeed: number
  directionVariance: number
  logSpeedVariance: number
  /** Covariance of direction and ln speed. */
  cross: number
  /** rad; null where the array cannot tell. */
  spread: number | null
  /** Hz. */
  peak: number
  /** m²/Hz at the peak. */
  peakDensity: number
  /** m². */
  m0: number
  /** Coefficient of variation of m0. */
  samplingError: number | null
  band: { from: number; to: number }
}

const degrees = 180 / Math.PI

/** `axis` is the bearing of the frame's x axis in radians from east. */
export function describeTrain(
  train: TrainVector,
  key: number,
  axis: number,
  depth: number,
  gravity: number,
): WaveSystem {
  const angle = train.direction + axis
  const toward = degreesTrue(angle)
  const linearSpeed = phaseSpeed(1 / train.peak, depth, gravity)
  const cos = Math.cos(angle)
  const sin = Math.sin(angle)
  const { speed, directionVariance: vd, logSpeedVariance: vs, cross } = train
  const s2 = 1 / (speed * speed)
  const height = 4 * Math.sqrt(Math.max(0, train.m0))
  return {
    key,
    name: systemName(train.peak, train.peakDensity, gravity),
    significantWaveHeight: height,
    significantWaveHeightSd: train.samplingError === null ? null : 0.5 * train.samplingError * height,
    peakPeriod: 1 / train.peak,
    from: opposite(toward),
    toward,
    headingSd: Math.sqrt(vd) * degrees,
    measuredSpeed: train.measuredSpeed,
    speed,
    speedSd: speed * Math.sqrt(vs),
    linearSpeed,
    speedRatio: speed / linearSpeed,
    directionalSpread: train.spread === null ? null : train.spread * degrees,
    slownessEast: cos / speed,
    slownessNorth: sin / speed,
    slownessCovariance: {
      eastEast: s2 * (sin * sin * vd + 2 * sin * cos * cross + cos * cos * vs),
      eastNorth: s2 * (-sin * cos * vd + (sin * sin - cos * cos) * cross + sin * cos * vs),
      northNorth: s2 * (cos * cos * vd - 2 * sin * cos * cross + sin * sin * vs),
    },
    band: train.band,
  }
}

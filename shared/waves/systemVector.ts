/** From fitted parameters of one train to speed, heading, spread and their covariance at a frequency. */
import { dopplerWaveNumber } from './dopplerDispersion.ts'
import type { SeaFit } from './seaFit.ts'
import { currentAt, depthAt, directionAt, parameterCount, parametersPerSystem, spreadAt } from './seaModel.ts'

export interface SystemVector {
  /** Radians of travel in the frame. */
  direction: number
  /** m/s. */
  speed: number
  /** rad. */
  spread: number
  /** Covariance of (direction, ln speed). */
  directionVariance: number
  logSpeedVariance: number
  cross: number
}

/** `covariance` is that of all parameters, row by row. */
export function systemVector(fit: SeaFit, covariance: Float64Array, system: number, frequency: number): SystemVector {
  const base = system * parametersPerSystem
  const p = fit.state.parameters
  const wave = { k: 0, dkByCurrent: 0, dkByLogDepth: 0 }
  const omega = 2 * Math.PI * frequency
  dopplerWaveNumber(omega, Math.exp(p[base + depthAt]), p[base + currentAt], fit.model.gravity, wave)
  const count = parameterCount(fit.model)
  const at = (a: number, b: number) => covariance[(base + a) * count + base + b]
  const du = -wave.dkByCurrent / wave.k
  const dh = -wave.dkByLogDepth / wave.k
  return {
    direction: p[base + directionAt],
    speed: omega / wave.k,
    spread: Math.exp(p[base + spreadAt]),
    directionVariance: at(directionAt, directionAt),
    logSpeedVariance:
      du * du * at(currentAt, currentAt) + 2 * du * dh * at(currentAt, depthAt) + dh * dh * at(depthAt, depthAt),
    cross: du * at(directionAt, currentAt) + dh * at(directionAt, depthAt),
  }
}

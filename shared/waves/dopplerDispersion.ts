/**
 * Waves on a current that runs U m/s along their own heading over a depth h: ω = √(g k tanh kh) + k U (Peregrine 1976).
 * A current and a wrongly stated depth are the two ways in which linear theory at the stated depth goes wrong; with
 * U and ln h free, the array measures the speed at every frequency instead of quoting it.
 */
import { waveNumber } from './dispersion.ts'

/** Wave number with its derivatives to U and to ln h. */
export interface DopplerWaveNumber {
  k: number
  dkByCurrent: number
  dkByLogDepth: number
}

/**
 * Solves for k into `answer`. The current is held above −0.9 of the group speed, where an opposing current would stop the wave.
 */
export function dopplerWaveNumber(
  omega: number,
  depth: number,
  current: number,
  gravity: number,
  answer: DopplerWaveNumber,
): void {
  const still = waveNumber(omega, depth, gravity)
  let k = still / (1 + (current * still) / omega)
  if (!(k > 0)) k = still
  let slope = 1
  let sigma = omega
  let t = 1
  for (let step = 0; step < 12; step++) {
    t = Math.tanh(k * depth)
    sigma = Math.sqrt(gravity * k * t)
    const groupSpeed = (gravity * (t + k * depth * (1 - t * t))) / (2 * sigma)
    slope = Math.max(groupSpeed + current, 0.1 * groupSpeed)
    const change = (sigma + k * current - omega) / slope
    k = Math.min(Math.max(k - change, 0.2 * k), 5 * still)
    if (Math.abs(change) < 1e-15 * k) break
  }
  answer.k = k
  answer.dkByCurrent = -k / slope
  answer.dkByLogDepth = (-gravity * k * k * depth * (1 - t * t)) / (2 * sigma * slope)
}

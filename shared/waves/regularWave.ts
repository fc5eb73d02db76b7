/** The vector of a regular wave from the phases of its line at each sensor. */
import { beamSearch } from './beamSearch.ts'
import type { BandMatrices } from './bandMatrices.ts'
import { waveNumber } from './dispersion.ts'
import type { Sinusoid } from './sinusoid.ts'
import { fitSlowness } from './slownessFit.ts'

export interface RegularWave {
  /** Slowness in the frame, s/m, with covariance of the noise, s²/m². */
  x: number
  y: number
  xx: number
  xy: number
  yy: number
  /** Root mean square of lag less fit, s. */
  residual: number
  /** Power of the second best cycle over the best, 0 when there is none. */
  runnerUp: number
}

/** Null when the sensors do not span the plane. `samples` a sensor stand behind the line. */
export function regularWave(
  line: Sinusoid,
  x: Float64Array,
  y: Float64Array,
  depth: number,
  gravity: number,
  samples: number,
): RegularWave | null {
  const m = x.length
  const omega = 2 * Math.PI * line.frequency
  const beams = beamSearch(lineMatrix(line), x, y, depth, gravity)
  if (beams.length === 0) return null
  const first = slownessOf(line, x, y, beams[0].direction, beams[0].speedRatio, depth, gravity, omega)
  if (!first) return null
  let variance = 0
  for (let i = 0; i < m; i++) {
    const amplitude = line.real[i] ** 2 + line.imag[i] ** 2
    variance += (2 * line.residual[i]) / (samples * amplitude) / m
  }
  const timeVariance = variance / (omega * omega)
  let qxx = 0
  let qxy = 0
  let qyy = 0
  for (let i = 0; i < m; i++) {
    qxx += x[i] * x[i]
    qxy += x[i] * y[i]
    qyy += y[i] * y[i]
  }
  const determinant = qxx * qyy - qxy * qxy
  return {
    x: first.x,
    y: first.y,
    xx: (timeVariance * qyy) / determinant,
    xy: (-timeVariance * qxy) / determinant,
    yy: (timeVariance * qxx) / determinant,
    residual: first.residual,
    runnerUp: beams.length > 1 ? beams[1].power / beams[0].power : 0,
  }
}

function lineMatrix(line: Sinusoid): BandMatrices {
  const m = line.real.length
  const real = new Float64Array(m * m)
  const imag = new Float64Array(m * m)
  for (let i = 0; i < m; i++) {
    for (let j = 0; j < m; j++) {
      real[i * m + j] = line.real[i] * line.real[j] + line.imag[i] * line.imag[j]
      imag[i * m + j] = line.imag[i] * line.real[j] - line.real[i] * line.imag[j]
    }
  }
  let density = 0
  for (let i = 0; i < m; i++) density += real[i * m + i] / m
  return {
    sensors: m,
    groups: 1,
    frequency: Float64Array.of(line.frequency),
    width: Float64Array.of(1),
    averages: Float64Array.of(1),
    real,
    imag,
    density: Float64Array.of(density),
    noise: new Float64Array(m),
  }
}

function slownessOf(
  line: Sinusoid,
  x: Float64Array,
  y: Float64Array,
  direction: number,
  ratio: number,
  depth: number,
  gravity: number,
  omega: number,
) {
  const s0 = waveNumber(omega, depth, gravity) / (omega * ratio)
  let sx = s0 * Math.cos(direction)
  let sy = s0 * Math.sin(direction)
  let fit = null
  for (let step = 0; step < 3; step++) {
    const lags = []
    for (let i = 0; i < x.length; i++) {
      for (let j = i + 1; j < x.length; j++) {
        const near = sx * (x[j] - x[i]) + sy * (y[j] - y[i])
        const real = line.real[j] * line.real[i] + line.imag[j] * line.imag[i]
        const imag = line.imag[j] * line.real[i] - line.real[j] * line.imag[i]
        const phase = Math.atan2(imag, real) + omega * near
        lags.push({ i, j, lag: near - Math.atan2(Math.sin(phase), Math.cos(phase)) / omega, weight: 1 })
      }
    }
    fit = fitSlowness(x, y, lags)
    if (!fit) return null
    sx = fit.x
    sy = fit.y
  }
  return fit
}

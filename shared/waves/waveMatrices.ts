/**
 * What a train of waves with directional spread does to the cross-spectral matrix of the array at one frequency:
 * Γ_mn = ∫ D(α) exp(−i k u(α)·(r_m − r_n)) dα, with its derivatives to mean direction, wave number and ln spread.
 */
import type { SpreadingNodes } from './spreading.ts'

/** Real and imaginary parts, sensors² numbers each, row by row. */
export interface ComplexMatrix {
  real: Float64Array
  imag: Float64Array
}

export const complexMatrix = (sensors: number): ComplexMatrix => ({
  real: new Float64Array(sensors * sensors),
  imag: new Float64Array(sensors * sensors),
})

export interface WaveMatrices {
  gamma: ComplexMatrix
  byDirection: ComplexMatrix
  byWaveNumber: ComplexMatrix
  byLogSpread: ComplexMatrix
  /** To the slope of the wave number with the sine of the offset from the mean direction. */
  byTilt: ComplexMatrix
}

export const waveMatrices = (sensors: number): WaveMatrices => ({
  gamma: complexMatrix(sensors),
  byDirection: complexMatrix(sensors),
  byWaveNumber: complexMatrix(sensors),
  byLogSpread: complexMatrix(sensors),
  byTilt: complexMatrix(sensors),
})

const maxSensors = 64
const steerReal = new Float64Array(maxSensors)
const steerImag = new Float64Array(maxSensors)
const along = new Float64Array(maxSensors)
const across = new Float64Array(maxSensors)

/**
 * Fills `out`. `x`, `y` in m, `direction` in radians of travel in the frame of x and y. The wave number at an offset δ is
 * `k + tilt sin δ`, rad/m.
 */
export function fillWaveMatrices(
  x: Float64Array,
  y: Float64Array,
  direction: number,
  k: number,
  tilt: number,
  nodes: SpreadingNodes,
  out: WaveMatrices,
): void {
  const m = x.length
  const { gamma, byDirection, byWaveNumber, byLogSpread, byTilt } = out
  for (const matrix of [gamma, byDirection, byWaveNumber, byLogSpread, byTilt]) {
    matrix.real.fill(0)
    matrix.imag.fill(0)
  }
  const cosDirection = Math.cos(direction)
  const sinDirection = Math.sin(direction)
  for (let node = 0; node < nodes.count; node++) {
    const c = cosDirection * nodes.cos[node] - sinDirection * nodes.sin[node]
    const s = sinDirection * nodes.cos[node] + cosDirection * nodes.sin[node]
    const kHere = k + tilt * nodes.sin[node]
    const sine = nodes.sin[node]
    const weight = nodes.weight[node]
    const weightByLogSpread = nodes.weightByLogSpread[node]
    for (let i = 0; i < m; i++) {
      along[i] = x[i] * c + y[i] * s
      across[i] = y[i] * c - x[i] * s
      steerReal[i] = Math.cos(kHere * along[i])
      steerImag[i] = -Math.sin(kHere * along[i])
    }
    for (let i = 1; i < m; i++) {
      const ir = steerReal[i]
      const ii = steerImag[i]
      for (let j = 0; j < i; j++) {
        const er = ir * steerReal[j] + ii * steerImag[j]
        const ei = ii * steerReal[j] - ir * steerImag[j]
        const at = i * m + j
        gamma.real[at] += weight * er
        gamma.imag[at] += weight * ei
        const turn = weight * kHere * (across[i] - across[j])
        byDirection.real[at] += turn * ei
        byDirection.imag[at] -= turn * er
        const stretch = weight * (along[i] - along[j])
        byWaveNumber.real[at] += stretch * ei
        byWaveNumber.imag[at] -= stretch * er
        byTilt.real[at] += sine * stretch * ei
        byTilt.imag[at] -= sine * stretch * er
        byLogSpread.real[at] += weightByLogSpread * er
        byLogSpread.imag[at] += weightByLogSpread * ei
      }
    }
  }
  for (let i = 0; i < m; i++) {
    gamma.real[i * m + i] = 1
    for (let j = 0; j < i; j++) {
      const at = i * m + j
      const mirrored = j * m + i
      for (const matrix of [gamma, byDirection, byWaveNumber, byLogSpread, byTilt]) {
        matrix.real[mirrored] = matrix.real[at]
        matrix.imag[mirrored] = -matrix.imag[at]
      }
    }
  }
}

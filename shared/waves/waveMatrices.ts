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

/** Steering of every sensor at every node, node by node; kept between calls. */
let steerReal = new Float64Array(0)
let steerImag = new Float64Array(0)
let along = new Float64Array(0)
let across = new Float64Array(0)

function makeRoom(size: number): void {
  if (steerReal.length >= size) return
  steerReal = new Float64Array(2 * size)
  steerImag = new Float64Array(2 * size)
  along = new Float64Array(2 * size)
  across = new Float64Array(2 * size)
}

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
  const { count, cos, sin, weight, weightByLogSpread } = nodes
  makeRoom(count * m)
  const cosDirection = Math.cos(direction)
  const sinDirection = Math.sin(direction)
  for (let node = 0; node < count; node++) {
    const c = cosDirection * cos[node] - sinDirection * sin[node]
    const s = sinDirection * cos[node] + cosDirection * sin[node]
    const kHere = k + tilt * sin[node]
    for (let i = 0; i < m; i++) {
      const at = node * m + i
      along[at] = x[i] * c + y[i] * s
      across[at] = y[i] * c - x[i] * s
      steerReal[at] = Math.cos(kHere * along[at])
      steerImag[at] = -Math.sin(kHere * along[at])
    }
  }
  // Pair by pair, so that the sums over the nodes stay in registers.
  for (let i = 0; i < m; i++) {
    setPair(gamma, m, i, i, 1, 0)
    for (const matrix of [byDirection, byWaveNumber, byLogSpread, byTilt]) setPair(matrix, m, i, i, 0, 0)
    for (let j = 0; j < i; j++) {
      let gammaReal = 0
      let gammaImag = 0
      let directionReal = 0
      let directionImag = 0
      let numberReal = 0
      let numberImag = 0
      let tiltReal = 0
      let tiltImag = 0
      let spreadReal = 0
      let spreadImag = 0
      for (let node = 0; node < count; node++) {
        const one = node * m + i
        const other = node * m + j
        const er = steerReal[one] * steerReal[other] + steerImag[one] * steerImag[other]
        const ei = steerImag[one] * steerReal[other] - steerReal[one] * steerImag[other]
        const own = weight[node]
        gammaReal += own * er
        gammaImag += own * ei
        const turn = own * (k + tilt * sin[node]) * (across[one] - across[other])
        directionReal += turn * ei
        directionImag -= turn * er
        const stretch = own * (along[one] - along[other])
        numberReal += stretch * ei
        numberImag -= stretch * er
        tiltReal += sin[node] * stretch * ei
        tiltImag -= sin[node] * stretch * er
        spreadReal += weightByLogSpread[node] * er
        spreadImag += weightByLogSpread[node] * ei
      }
      setPair(gamma, m, i, j, gammaReal, gammaImag)
      setPair(byDirection, m, i, j, directionReal, directionImag)
      setPair(byWaveNumber, m, i, j, numberReal, numberImag)
      setPair(byTilt, m, i, j, tiltReal, tiltImag)
      setPair(byLogSpread, m, i, j, spreadReal, spreadImag)
    }
  }
}

/** Element ij and its conjugate ji. */
function setPair(matrix: ComplexMatrix, m: number, i: number, j: number, real: number, imag: number): void {
  matrix.real[i * m + j] = real
  matrix.real[j * m + i] = real
  matrix.imag[i * m + j] = imag
  matrix.imag[j * m + i] = -imag
}

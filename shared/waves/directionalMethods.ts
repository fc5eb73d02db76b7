/**
 * Directional density at one frequency from the cross-spectral matrix of an array (C = ⟨X X^*⟩, steering a_m = e^{−ik u·r_m}):
 * conventional beam (Barber 1963), Capon's maximum likelihood method (Capon 1969; Isobe, Kondo & Horikawa 1984) and its iterated form
 * IMLM (Pawka 1983; Oltman-Shay & Guza 1984), which gives the cross-spectra back that were measured.
 */
import { invertHermitian } from './hermitian.ts'
import { complexMatrix } from './waveMatrices.ts'
import type { ComplexMatrix } from './waveMatrices.ts'

export interface Steering {
  /** directions × sensors, real and imaginary parts of a. */
  real: Float64Array
  imag: Float64Array
  directions: number
  sensors: number
}

/** Directions evenly around the circle from `first`, radians of travel in the frame; `k` in rad/m. */
export function steering(x: Float64Array, y: Float64Array, k: number, directions: number, first: number): Steering {
  const sensors = x.length
  const real = new Float64Array(directions * sensors)
  const imag = new Float64Array(directions * sensors)
  for (let d = 0; d < directions; d++) {
    const angle = first + (2 * Math.PI * d) / directions
    for (let m = 0; m < sensors; m++) {
      const phase = k * (x[m] * Math.cos(angle) + y[m] * Math.sin(angle))
      real[d * sensors + m] = Math.cos(phase)
      imag[d * sensors + m] = -Math.sin(phase)
    }
  }
  return { real, imag, directions, sensors }
}

/** aᴴ M a in every direction. */
function forms({ real, imag, directions, sensors }: Steering, matrix: ComplexMatrix): Float64Array {
  const out = new Float64Array(directions)
  for (let d = 0; d < directions; d++) {
    const at = d * sensors
    let sum = 0
    for (let i = 0; i < sensors; i++) {
      sum += matrix.real[i * sensors + i]
      for (let j = 0; j < i; j++) {
        const re = real[at + i] * real[at + j] + imag[at + i] * imag[at + j]
        const im = real[at + i] * imag[at + j] - imag[at + i] * real[at + j]
        sum += 2 * (matrix.real[i * sensors + j] * re - matrix.imag[i * sensors + j] * im)
      }
    }
    out[d] = sum
  }
  return out
}

/** Shares of the energy, sum 1. */
function normalised(values: Float64Array): Float64Array {
  let sum = 0
  for (let d = 0; d < values.length; d++) sum += values[d]
  return values.map((value) => value / sum)
}

export const conventional = (steer: Steering, matrix: ComplexMatrix): Float64Array => normalised(forms(steer, matrix))

/** Null where the matrix is not positive definite. */
export function capon(steer: Steering, matrix: ComplexMatrix): Float64Array | null {
  const { sensors } = steer
  const inverse = complexMatrix(sensors)
  const work = new Float64Array(4 * sensors * sensors)
  const determinant = invertHermitian(sensors, matrix.real, matrix.imag, inverse.real, inverse.imag, work)
  if (!(determinant === determinant)) return null
  return normalised(forms(steer, inverse).map((value) => 1 / value))
}

/** Steps of the iteration, and the mean change of Capon's answer, weighted by energy, at which it has settled. */
const mostSteps = 40
const settled = 0.03
/** γ of Pawka's correction; β is 0. */
const relaxation = 2

export interface IteratedDensity {
  /** Shares of the energy by direction, sum 1. */
  share: Float64Array
  converged: boolean
  steps: number
}

/**
 * IMLM. `matrix` holds coherences of a surface with noise: its diagonal is 1 + noise, `noise` as a share of the energy. Raises or
 * lowers each direction until Capon's method says of the density found what it said of the record.
 */
export function iteratedCapon(steer: Steering, matrix: ComplexMatrix, noise: number): IteratedDensity | null {
  const target = capon(steer, matrix)
  if (!target) return null
  let share = target
  for (let step = 1; step <= mostSteps; step++) {
    const again = capon(steer, coherenceOf(steer, share, noise))
    if (!again) return null
    let off = 0
    const next = new Float64Array(share.length)
    for (let d = 0; d < share.length; d++) {
      const lambda = 1 - again[d] / target[d]
      off += share[d] * Math.abs(lambda)
      next[d] = share[d] * Math.max(0.2, 1 + lambda / relaxation)
    }
    if (off < settled) return { share, converged: true, steps: step }
    share = normalised(next)
  }
  return { share, converged: false, steps: mostSteps }
}

/** Σ D a aᴴ + noise on the diagonal. */
export function coherenceOf(steer: Steering, share: Float64Array, noise: number): ComplexMatrix {
  const { real, imag, directions, sensors } = steer
  const out = complexMatrix(sensors)
  for (let d = 0; d < directions; d++) {
    const at = d * sensors
    for (let i = 0; i < sensors; i++) {
      for (let j = 0; j < i; j++) {
        out.real[i * sensors + j] += share[d] * (real[at + i] * real[at + j] + imag[at + i] * imag[at + j])
        out.imag[i * sensors + j] += share[d] * (imag[at + i] * real[at + j] - real[at + i] * imag[at + j])
      }
    }
  }
  for (let i = 0; i < sensors; i++) {
    out.real[i * sensors + i] = 1 + noise
    for (let j = 0; j < i; j++) {
      out.real[j * sensors + i] = out.real[i * sensors + j]
      out.imag[j * sensors + i] = -out.imag[i * sensors + j]
    }
  }
  return out
}

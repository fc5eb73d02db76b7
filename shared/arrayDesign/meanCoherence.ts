/**
 * Coherences between sensors of one short-crested train at one frequency, and how they change with its direction, with the length of
 * its slowness and with its spread: Γ_ij = ∫ D(α) exp(-i k u(θ+α)·(r_i - r_j)) dα with D ~ cos^2s(α/2), σ = √(2/(s+1)).
 */
import type { GridPosition } from '../geodesy.ts'

/** A square complex matrix, row by row. */
export interface SquareMatrix {
  real: Float64Array
  imag: Float64Array
}

export interface MeanCoherence {
  /** Itself, and its derivatives by direction (rad), by ln of the slowness, by ln of the spread. */
  value: SquareMatrix
  byDirection: SquareMatrix
  bySlowness: SquareMatrix
  /** Null for a long-crested sea, which has no spread to be unsure of. */
  bySpread: SquareMatrix | null
}

/** Narrower than this a sea counts as long-crested, rad. */
const leastSpread = 0.02

const matrix = (size: number): SquareMatrix => ({
  real: new Float64Array(size * size),
  imag: new Float64Array(size * size),
})

/** `k` in rad/m, `toward` and `spread` in radians, the direction anticlockwise from east. */
export function meanCoherence(
  sensors: readonly GridPosition[],
  k: number,
  toward: number,
  spread: number,
  longestBaseline: number,
): MeanCoherence {
  const size = sensors.length
  const isSpread = spread >= leastSpread
  const nodes = isSpread ? spreadNodes(spread, k * longestBaseline) : [{ offset: 0, share: 1, change: 0 }]
  const value = matrix(size)
  const byDirection = matrix(size)
  const bySlowness = matrix(size)
  const bySpread = matrix(size)
  for (const { offset, share, change } of nodes) {
    const kx = k * Math.cos(toward + offset)
    const ky = k * Math.sin(toward + offset)
    for (let i = 0; i < size; i++) {
      for (let j = 0; j <= i; j++) {
        const x = sensors[i].east - sensors[j].east
        const y = sensors[i].north - sensors[j].north
        const phase = kx * x + ky * y
        const turn = kx * y - ky * x
        const cos = Math.cos(phase)
        const sin = Math.sin(phase)
        const at = i * size + j
        value.real[at] += share * cos
        value.imag[at] -= share * sin
        byDirection.real[at] -= share * turn * sin
        byDirection.imag[at] -= share * turn * cos
        bySlowness.real[at] -= share * phase * sin
        bySlowness.imag[at] -= share * phase * cos
        bySpread.real[at] += change * cos
        bySpread.imag[at] -= change * sin
      }
    }
  }
  for (const one of [value, byDirection, bySlowness, bySpread]) mirror(one, size)
  return { value, byDirection, bySlowness, bySpread: isSpread ? bySpread : null }
}

function mirror({ real, imag }: SquareMatrix, size: number): void {
  for (let i = 0; i < size; i++) {
    for (let j = 0; j < i; j++) {
      real[j * size + i] = real[i * size + j]
      imag[j * size + i] = -imag[i * size + j]
    }
  }
}

interface Node {
  /** Off the mean direction, rad. */
  offset: number
  share: number
  /** Of the share with ln of the spread. */
  change: number
}

/** Close enough together that a phase turns by less than a radian from one to the next. */
function spreadNodes(spread: number, phaseReach: number): Node[] {
  const reach = Math.min(Math.PI, 5 * spread)
  const count = Math.min(241, 21 + 2 * Math.ceil(phaseReach * reach))
  const s = 2 / spread ** 2 - 1
  const logs = Array.from({ length: count }, (_, n) => {
    const offset = reach * ((2 * n + 1) / count - 1)
    return { offset, log: 2 * Math.log(Math.cos(offset / 2)) }
  })
  const weights = logs.map(({ log }) => Math.exp(s * log))
  const total = weights.reduce((sum, weight) => sum + weight, 0)
  const meanLog = logs.reduce((sum, { log }, n) => sum + (log * weights[n]) / total, 0)
  // ds / d ln σ = -4/σ²
  return logs.map(({ offset, log }, n) => {
    const share = weights[n] / total
    return { offset, share, change: (share * (log - meanLog) * -4) / spread ** 2 }
  })
}

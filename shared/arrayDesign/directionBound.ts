/**
 * The least variance that any reading of direction and speed can have: the Cramér-Rao bound of one train over an array by the
 * formula of Slepian (1954) and Bangs (1971), J_ab = T ∫ tr(R⁻¹ ∂_a R R⁻¹ ∂_b R) df with R = S Γ + N. Unknown beside them are the
 * density at every frequency and, in a short-crested sea, the spread. For a long-crested sea it is the closed form
 * J = 2T ∫ (2πf)² M ρ²/(1 + Mρ) df Q.
 */
import type { GridPosition } from '../geodesy.ts'
import { invertHermitian } from '../waves/hermitian.ts'
import { meanCoherence } from './meanCoherence.ts'
import type { MeanCoherence, SquareMatrix } from './meanCoherence.ts'

/** One frequency of the sea that the bound is asked for. */
export interface SeaLine {
  /** Width that it stands for, Hz. */
  width: number
  /** Density of the train's surface, m²/Hz. */
  density: number
  /** Density of each sensor's noise, as surface, m²/Hz. */
  noise: readonly number[]
  /** rad/m */
  waveNumber: number
}

export interface DirectionVariance {
  /** Of the direction, rad²; of ln speed; and between direction (anticlockwise) and ln speed. */
  direction: number
  logSpeed: number
  cross: number
}

/** Coherences of all lines of a sea toward one direction, for all sensors. */
export function coherencesOf(
  sensors: readonly GridPosition[],
  lines: readonly SeaLine[],
  toward: number,
  spread: number,
  longestBaseline: number,
): MeanCoherence[] {
  return lines.map(({ waveNumber }) => meanCoherence(sensors, waveNumber, toward, spread, longestBaseline))
}

/**
 * Of the whole array, then of the array without each of its sensors in turn; record length in s. Null where an array cannot tell
 * direction and speed: fewer than three sensors, or all on a line.
 */
export function directionBounds(
  coherences: readonly MeanCoherence[],
  lines: readonly SeaLine[],
  seconds: number,
): (DirectionVariance | null)[] {
  const size = lines[0]?.noise.length ?? 0
  const count = coherences[0]?.bySpread === null ? 2 : 3
  const sums = Array.from({ length: size + 1 }, () => Array.from({ length: count }, () => new Float64Array(count)))
  for (const [n, line] of lines.entries()) {
    const traces = tracesOf(coherences[n], line, size)
    if (!traces) return sums.map(() => null)
    traces.forEach((trace, which) => addInformation(sums[which], trace, seconds * line.width))
  }
  return sums.map((information, which) => (size - (which > 0 ? 1 : 0) < 3 ? null : invert(information)))
}

/** Adds one frequency's information, with the density taken out as unknown (Schur's complement). */
function addInformation(sum: Float64Array[], traces: readonly Float64Array[], weight: number): void {
  for (let a = 0; a < sum.length; a++) {
    for (let b = 0; b < sum.length; b++) {
      const own = traces[a + 1][b + 1] - (traces[a + 1][0] * traces[0][b + 1]) / traces[0][0]
      sum[a][b] += weight * own
    }
  }
}

/**
 * tr(R⁻¹ A R⁻¹ B) for the density's change and the others', of the whole array and without each sensor. Without sensor i the inverse
 * is P - p p'/p_ii with p the i-th column of P = R⁻¹, so each comes from the whole one in the square of the number of sensors.
 */
function tracesOf(coherence: MeanCoherence, line: SeaLine, size: number): Float64Array[][] | null {
  const { value, byDirection, bySlowness, bySpread } = coherence
  const whole = { real: value.real.map((v) => v * line.density), imag: value.imag.map((v) => v * line.density) }
  for (let i = 0; i < size; i++) whole.real[i * size + i] += line.noise[i]
  const inverse = { real: new Float64Array(size * size), imag: new Float64Array(size * size) }
  const work = new Float64Array(4 * size * size)
  if (Number.isNaN(invertHermitian(size, whole.real, whole.imag, inverse.real, inverse.imag, work))) return null
  const changes = [value, byDirection, bySlowness, ...(bySpread ? [bySpread] : [])]
  const scales = changes.map((_, n) => (n === 0 ? 1 : line.density))
  const products = changes.map((change, n) => product(inverse, change, size, scales[n]))
  const ofAll = products.map((a) => Float64Array.from(products, (b) => traceOfProduct(a, b, size)))
  const without = Array.from({ length: size }, (_, i) => {
    const p = columnOf(inverse, i, size)
    const pivot = inverse.real[i * size + i]
    const turned = changes.map((change, n) => timesVector(change, p, size, scales[n]))
    const lengths = turned.map((y) => inner(p, y))
    const carried = turned.map((y) => timesVector(inverse, y, size, 1))
    return turned.map(
      (y, a) =>
      Float64Array.from(turned, (_, b) => ofAll[a][b] - (2 * inner(y, carried[b])) / pivot + (lengths[a] * lengths[b]) / pivot ** 2), // prettier-ignore
    )
  })
  return [ofAll, ...without]
}

function columnOf({ real, imag }: SquareMatrix, column: number, size: number): SquareMatrix {
  return {
    real: Float64Array.from({ length: size }, (_, row) => real[row * size + column]),
    imag: Float64Array.from({ length: size }, (_, row) => imag[row * size + column]),
  }
}

function timesVector(a: SquareMatrix, x: SquareMatrix, size: number, factor: number): SquareMatrix {
  const out = { real: new Float64Array(size), imag: new Float64Array(size) }
  for (let i = 0; i < size; i++) {
    let [real, imag] = [0, 0]
    for (let k = 0; k < size; k++) {
      const at = i * size + k
      real += a.real[at] * x.real[k] - a.imag[at] * x.imag[k]
      imag += a.real[at] * x.imag[k] + a.imag[at] * x.real[k]
    }
    out.real[i] = factor * real
    out.imag[i] = factor * imag
  }
  return out
}

/** Real part of x' y with x conjugated. */
function inner(x: SquareMatrix, y: SquareMatrix): number {
  let sum = 0
  for (let n = 0; n < x.real.length; n++) sum += x.real[n] * y.real[n] + x.imag[n] * y.imag[n]
  return sum
}

function product(a: SquareMatrix, b: SquareMatrix, size: number, factor: number): SquareMatrix {
  const out = { real: new Float64Array(size * size), imag: new Float64Array(size * size) }
  for (let i = 0; i < size; i++) {
    for (let k = 0; k < size; k++) {
      const ar = a.real[i * size + k] * factor
      const ai = a.imag[i * size + k] * factor
      for (let j = 0; j < size; j++) {
        out.real[i * size + j] += ar * b.real[k * size + j] - ai * b.imag[k * size + j]
        out.imag[i * size + j] += ar * b.imag[k * size + j] + ai * b.real[k * size + j]
      }
    }
  }
  return out
}

/** Real part of tr(A B). */
function traceOfProduct(a: SquareMatrix, b: SquareMatrix, size: number): number {
  let trace = 0
  for (let i = 0; i < size; i++) {
    for (let k = 0; k < size; k++) {
      trace += a.real[i * size + k] * b.real[k * size + i] - a.imag[i * size + k] * b.imag[k * size + i]
    }
  }
  return trace
}

/** The first two rows and columns of the inverse; null where the information is singular. */
function invert(information: readonly Float64Array[]): DirectionVariance | null {
  const [[aa, ab], [, bb]] = information
  // What the spread takes away, where it is unknown.
  const spread = information[2]
  const take = (x: number, y: number): number => (spread && spread[2] > 0 ? (spread[x] * spread[y]) / spread[2] : 0)
  const [p, q, r] = [aa - take(0, 0), ab - take(0, 1), bb - take(1, 1)]
  const determinant = p * r - q * q
  if (!(determinant > 1e-9 * Math.abs(aa * bb))) return null
  return { direction: r / determinant, logSpeed: p / determinant, cross: q / determinant }
}

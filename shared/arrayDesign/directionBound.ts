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

/** Indices of all sensors but one. */
export const allBut = (count: number, left: number | null): number[] =>
  Array.from({ length: count }, (_, n) => n).filter((n) => n !== left)

/**
 * For the sensors named by their indices; record length in s. Null where the array cannot tell direction and speed: fewer than
 * three sensors, or all on a line.
 */
export function directionBound(
  coherences: readonly MeanCoherence[],
  lines: readonly SeaLine[],
  kept: readonly number[],
  seconds: number,
): DirectionVariance | null {
  if (kept.length < 3) return null
  const hasSpread = coherences[0]?.bySpread !== null
  const count = hasSpread ? 3 : 2
  const information = Array.from({ length: count }, () => new Float64Array(count))
  for (const [n, line] of lines.entries()) {
    const own = informationOf(coherences[n], line, kept)
    if (!own) return null
    for (let a = 0; a < count; a++) {
      for (let b = 0; b < count; b++) information[a][b] += seconds * line.width * own[a][b]
    }
  }
  return invert(information)
}

/** Of one frequency and per second and hertz, with the density taken out as unknown (Schur's complement). */
function informationOf(coherence: MeanCoherence, line: SeaLine, kept: readonly number[]): number[][] | null {
  const size = kept.length
  const sea = chosen(coherence.value, kept)
  const whole = { real: sea.real.map((v) => v * line.density), imag: sea.imag.map((v) => v * line.density) }
  for (let i = 0; i < size; i++) whole.real[i * size + i] += line.noise[kept[i]]
  const inverse = { real: new Float64Array(size * size), imag: new Float64Array(size * size) }
  const work = new Float64Array(4 * size * size)
  if (Number.isNaN(invertHermitian(size, whole.real, whole.imag, inverse.real, inverse.imag, work))) return null
  const { byDirection, bySlowness, bySpread } = coherence
  const changes = [byDirection, bySlowness, ...(bySpread ? [bySpread] : [])]
  const products = [product(inverse, sea, size)]
  for (const change of changes) products.push(product(inverse, chosen(change, kept), size, line.density))
  const traces = products.map((a) => products.map((b) => traceOfProduct(a, b, size)))
  return changes.map((_, a) =>
    changes.map((_, b) => traces[a + 1][b + 1] - (traces[a + 1][0] * traces[0][b + 1]) / traces[0][0]),
  )
}

function chosen({ real, imag }: SquareMatrix, kept: readonly number[]): SquareMatrix {
  const size = kept.length
  const all = Math.round(Math.sqrt(real.length))
  if (size === all) return { real, imag }
  const out = { real: new Float64Array(size * size), imag: new Float64Array(size * size) }
  for (let i = 0; i < size; i++) {
    for (let j = 0; j < size; j++) {
      out.real[i * size + j] = real[kept[i] * all + kept[j]]
      out.imag[i * size + j] = imag[kept[i] * all + kept[j]]
    }
  }
  return out
}

function product(a: SquareMatrix, b: SquareMatrix, size: number, factor = 1): SquareMatrix {
  const out = { real: new Float64Array(size * size), imag: new Float64Array(size * size) }
  for (let i = 0; i < size; i++) {
    for (let k = 0; k < size; k++) {
      const [ar, ai] = [a.real[i * size + k] * factor, a.imag[i * size + k] * factor]
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

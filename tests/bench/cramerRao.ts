/**
 * The Cramér-Rao bound of heading and speed of one spread train over an array, by the formula of Slepian (1954) and Bangs (1971):
 * J_ab = ν tr(R⁻¹ ∂_a R R⁻¹ ∂_b R) summed over independent frequencies, R = S Γ + N I. Unknown beside them are the spread and the
 * density at every frequency. Derivatives by differences, apart from the program's.
 */
import { linearWaveNumber } from './seededSea.ts'

interface Hermitian {
  re: number[][]
  im: number[][]
}

export interface BoundQuestion {
  positions: { east: number; north: number }[]
  depth: number
  seconds: number
  /** Degrees. */
  toward: number
  spread: number
  /** Density of the train in m²/Hz at a frequency; noise density of a sensor. */
  density: (frequency: number) => number
  noise: number
  from: number
  to: number
}

/** One standard deviation of heading (degrees) and of ln speed. */
export function cramerRaoBound(question: BoundQuestion): { heading: number; logSpeed: number } {
  const { positions, seconds, density, noise, from, to } = question
  const m = positions.length
  const truth = [((90 - question.toward) * Math.PI) / 180, 0, Math.log((question.spread * Math.PI) / 180)]
  const h = 1e-4
  const count = 60
  const step = (to - from) / count
  const information = [0, 1, 2].map(() => [0, 0, 0])
  for (let n = 0; n < count; n++) {
    const f = from + (n + 0.5) * step
    const gamma = coherences(question, f, truth)
    const s = density(f)
    if (!(s > 1e-6 * noise)) continue
    const inverse = invert(sum(gamma, s, noise))
    const changes = [gamma, ...truth.map((_, a) => difference(question, f, truth, a, h))]
    const scales = [1, s, s, s]
    const products = changes.map((change, a) => product(inverse, scale(change, scales[a])))
    const own = products.map((left) => products.map((right) => seconds * step * traceOf(left, right)))
    // The density at this frequency is not known: taken out by Schur's complement.
    for (let a = 0; a < 3; a++)
      for (let b = 0; b < 3; b++) information[a][b] += own[a + 1][b + 1] - (own[a + 1][0] * own[0][b + 1]) / own[0][0]
  }
  const covariance = invert({ re: information, im: information.map((row) => row.map(() => 0)) }).re
  return { heading: (Math.sqrt(covariance[0][0]) * 180) / Math.PI, logSpeed: Math.sqrt(covariance[1][1]) }

  function sum(matrix: Hermitian, s: number, n: number): Hermitian {
    const scaled = scale(matrix, s)
    for (let i = 0; i < m; i++) scaled.re[i][i] += n
    return scaled
  }
}

/** Γ_ij = ∫ D(α) e^{−ik u·(r_i − r_j)} dα at direction, ln of slowness factor and ln spread given. */
function coherences(question: BoundQuestion, frequency: number, at: readonly number[]): Hermitian {
  const { positions, depth } = question
  const k = linearWaveNumber(2 * Math.PI * frequency, depth) * Math.exp(at[1])
  const sigma = Math.exp(at[2])
  const s = 2 / sigma ** 2 - 1
  const nodes = 240
  const reach = Math.min(Math.PI, 5 * sigma)
  const re = positions.map(() => positions.map(() => 0))
  const im = positions.map(() => positions.map(() => 0))
  let total = 0
  for (let n = 0; n < nodes; n++) {
    const offset = reach * ((2 * n + 1) / nodes - 1)
    const weight = Math.cos(offset / 2) ** (2 * s)
    total += weight
    const kx = k * Math.cos(at[0] + offset)
    const ky = k * Math.sin(at[0] + offset)
    for (let i = 0; i < positions.length; i++) {
      for (let j = 0; j < positions.length; j++) {
        const phase = kx * (positions[i].east - positions[j].east) + ky * (positions[i].north - positions[j].north)
        re[i][j] += weight * Math.cos(phase)
        im[i][j] -= weight * Math.sin(phase)
      }
    }
  }
  return scale({ re, im }, 1 / total)
}

function difference(question: BoundQuestion, f: number, truth: readonly number[], a: number, h: number): Hermitian {
  const more = coherences(
    question,
    f,
    truth.map((v, b) => (a === b ? v + h : v)),
  )
  const less = coherences(
    question,
    f,
    truth.map((v, b) => (a === b ? v - h : v)),
  )
  const part = (key: 're' | 'im') => more[key].map((row, i) => row.map((v, j) => (v - less[key][i][j]) / (2 * h)))
  return { re: part('re'), im: part('im') }
}

const scale = (matrix: Hermitian, factor: number): Hermitian => ({
  re: matrix.re.map((row) => row.map((v) => v * factor)),
  im: matrix.im.map((row) => row.map((v) => v * factor)),
})

function product(a: Hermitian, b: Hermitian): Hermitian {
  const n = a.re.length
  const cell = (i: number, j: number, real: boolean): number => {
    let value = 0
    for (let k = 0; k < n; k++)
      value += real
        ? a.re[i][k] * b.re[k][j] - a.im[i][k] * b.im[k][j]
        : a.re[i][k] * b.im[k][j] + a.im[i][k] * b.re[k][j]
    return value
  }
  const all = (real: boolean) => a.re.map((row, i) => row.map((_, j) => cell(i, j, real)))
  return { re: all(true), im: all(false) }
}

function traceOf(a: Hermitian, b: Hermitian): number {
  let value = 0
  for (let i = 0; i < a.re.length; i++)
    for (let k = 0; k < a.re.length; k++) value += a.re[i][k] * b.re[k][i] - a.im[i][k] * b.im[k][i]
  return value
}

/** Gauss-Jordan. */
function invert(matrix: Hermitian): Hermitian {
  const n = matrix.re.length
  const unit = (i: number, j: number) => Number(i === j)
  const re = matrix.re.map((row, i) => [...row, ...row.map((_, j) => unit(i, j))])
  const im = matrix.im.map((row) => [...row, ...row.map(() => 0)])
  for (let p = 0; p < n; p++) {
    const size = re[p][p] ** 2 + im[p][p] ** 2
    const [pr, pi] = [re[p][p] / size, -im[p][p] / size]
    for (let j = 0; j < 2 * n; j++)
      [re[p][j], im[p][j]] = [re[p][j] * pr - im[p][j] * pi, re[p][j] * pi + im[p][j] * pr]
    for (let i = 0; i < n; i++) {
      if (i === p) continue
      const [fr, fi] = [re[i][p], im[i][p]]
      for (let j = 0; j < 2 * n; j++) {
        re[i][j] -= fr * re[p][j] - fi * im[p][j]
        im[i][j] -= fr * im[p][j] + fi * re[p][j]
      }
    }
  }
  return { re: re.map((row) => row.slice(n)), im: im.map((row) => row.slice(n)) }
}

/**
 * Chance of a sighting from what was predicted: p = 1/(1 + exp(−(b₀ + Σ b x))), by maximum likelihood with Newton's steps (iteratively
 * reweighted least squares, McCullagh & Nelder 1989). Standard errors from the inverse of the information matrix.
 */
import { invertSymmetric, times } from '../waves/symmetric.ts'

export interface SightingRow {
  /** Predictors in the order of their names. */
  values: readonly number[]
  seen: boolean
}

export interface Coefficient {
  value: number
  standardError: number
}

export interface LogisticModel {
  intercept: Coefficient
  /** In the units of the predictors. */
  coefficients: Coefficient[]
  /** Covariance of intercept and coefficients, row by row. */
  covariance: Float64Array
  /** −2 ln L. */
  deviance: number
}

export type LogisticRefusal = 'separated' | 'does not vary' | 'no answer'

export const chanceOf = (model: LogisticModel, values: readonly number[]): number =>
  logistic(model.coefficients.reduce((sum, { value }, n) => sum + value * values[n], model.intercept.value))

export const logistic = (x: number): number => (x >= 0 ? 1 / (1 + Math.exp(-x)) : Math.exp(x) / (1 + Math.exp(x)))
/** ln(1 + eˣ) without overflow. */
const softplus = (x: number): number => (x > 0 ? x + Math.log1p(Math.exp(-x)) : Math.log1p(Math.exp(x)))

const mostSteps = 60
const settled = 1e-10
/** A coefficient of a standardised predictor beyond this: yes and no do not overlap, and the likelihood has no maximum. */
const separatedBeyond = 25

/** Refused where a predictor does not vary, predictors say the same, or yes and no are wholly apart. */
export function fitLogistic(
  rows: readonly SightingRow[],
  predictors: number,
): LogisticModel | { refused: LogisticRefusal } {
  const n = predictors + 1
  const middle = Array.from(
    { length: predictors },
    (_, p) => rows.reduce((sum, row) => sum + row.values[p], 0) / rows.length,
  )
  const scale = middle.map((mean, p) =>
    Math.sqrt(rows.reduce((sum, row) => sum + (row.values[p] - mean) ** 2, 0) / rows.length),
  )
  const yes = rows.filter(({ seen }) => seen).length
  if (scale.some((one) => !(one > 1e-12)) || yes === 0 || yes === rows.length) return { refused: 'does not vary' }
  const design = rows.map(({ values }) => [1, ...values.map((value, p) => (value - middle[p]) / scale[p])])
  let beta = new Float64Array(n)
  beta[0] = Math.log(yes / (rows.length - yes))
  for (let step = 0; step < mostSteps; step++) {
    const { gradient, information } = derivatives(design, rows, beta)
    const inverse = invertSymmetric(n, information)
    if (!inverse) return { refused: 'no answer' }
    const move = times(n, inverse, gradient)
    beta = downhill(design, rows, beta, move)
    if (beta.some((value) => Math.abs(value) > separatedBeyond)) return { refused: 'separated' }
    if (Math.max(...move.map(Math.abs)) < settled) {
      return unstandardised(beta, inverse, middle, scale, 2 * lossOf(design, rows, beta))
    }
  }
  return { refused: 'no answer' }
}

const linear = (row: readonly number[], beta: Float64Array): number =>
  row.reduce((sum, value, k) => sum + value * beta[k], 0)

/** −ln L. */
const lossOf = (design: number[][], rows: readonly SightingRow[], beta: Float64Array): number =>
  design.reduce((sum, row, i) => sum + softplus(rows[i].seen ? -linear(row, beta) : linear(row, beta)), 0)

/** The whole step, or the first of its halves that does not make the likelihood smaller. */
function downhill(
  design: number[][],
  rows: readonly SightingRow[],
  beta: Float64Array,
  move: Float64Array,
): Float64Array<ArrayBuffer> {
  const before = lossOf(design, rows, beta)
  for (let share = 1; share > 1e-6; share /= 2) {
    const next = beta.map((value, k) => value + share * move[k])
    if (lossOf(design, rows, next) <= before + 1e-12) return next
  }
  return beta.slice()
}

function derivatives(design: number[][], rows: readonly SightingRow[], beta: Float64Array) {
  const n = beta.length
  const gradient = new Float64Array(n)
  const information = new Float64Array(n * n)
  design.forEach((row, i) => {
    const p = logistic(linear(row, beta))
    const weight = p * (1 - p)
    for (let a = 0; a < n; a++) {
      gradient[a] += row[a] * ((rows[i].seen ? 1 : 0) - p)
      for (let b = 0; b < n; b++) information[a * n + b] += weight * row[a] * row[b]
    }
  })
  return { gradient, information }
}

/** Back from (x − mean)/scale to x: b = β/scale, b₀ = β₀ − Σ β mean/scale, the covariance by the same linear map. */
function unstandardised(
  beta: Float64Array,
  covariance: Float64Array,
  middle: number[],
  scale: number[],
  deviance: number,
): LogisticModel {
  const n = beta.length
  const map = new Float64Array(n * n)
  map[0] = 1
  for (let p = 1; p < n; p++) {
    map[p] = -middle[p - 1] / scale[p - 1]
    map[p * n + p] = 1 / scale[p - 1]
  }
  const values = times(n, map, beta)
  const out = new Float64Array(n * n)
  for (let a = 0; a < n; a++)
    for (let b = 0; b < n; b++)
      for (let c = 0; c < n; c++)
        for (let d = 0; d < n; d++) out[a * n + b] += map[a * n + c] * covariance[c * n + d] * map[b * n + d]
  const coefficient = (k: number): Coefficient => ({ value: values[k], standardError: Math.sqrt(out[k * n + k]) })
  const coefficients = middle.map((_, p) => coefficient(p + 1))
  return { intercept: coefficient(0), coefficients, covariance: out, deviance }
}

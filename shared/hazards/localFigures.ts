/**
 * Figures with a place's adopted local fit in them: a height times its local factor, the chance of a sighting by its logistic fit. Both
 * carry where the coefficients come from, so that nobody takes them for the published method alone.
 */
import { determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame } from './figure.ts'
import { logistic } from './logisticFit.ts'
import type { Coefficient } from './logisticFit.ts'
import { propagate } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

/** What a version of the place's settings holds of an adopted fit. */
export interface AdoptedFactor extends Coefficient {
  /** Observations behind it. */
  count: number
}

/** A figure that is not determined stays so. Scatter of the method stays in: one factor does not take it away. */
export function withLocalFactor(figure: Figure, factor: AdoptedFactor): Figure {
  if (figure.value === null) return figure
  const { value, standardError, count } = factor
  const words = `local factor from ${count} observations`
  return {
    ...figure,
    value: figure.value * value,
    sd: figure.sd === null ? null : Math.hypot(figure.sd * value, figure.value * standardError),
    likely: figure.likely && { from: figure.likely.from * value, to: figure.likely.to * value },
    uncertaintyFrom: `${figure.uncertaintyFrom}; and the standard error of the local factor`,
    method: {
      ...figure.method,
      name: `${figure.method.name}, times a local factor`,
      source: `${figure.method.source}; ${words}`,
    },
    inputs: [...figure.inputs, input('local factor', value, '1', standardError, words)],
  }
}

export interface AdoptedChance {
  predictors: readonly string[]
  intercept: Coefficient
  coefficients: readonly Coefficient[]
  /** Row by row, intercept first. */
  covariance: readonly number[]
  count: number
  /** Least and most of each predictor among the observations. */
  observedRange: readonly { from: number; to: number }[]
}

/** Chance of a sighting, 0 to 1, with its likely range. Refused for predictors beyond what was ever observed here. */
export function localChance(adopted: AdoptedChance, values: readonly (Uncertain | null)[]): Figure {
  const { predictors, intercept, coefficients, covariance, count, observedRange } = adopted
  const known = values.flatMap((value) => value ?? [])
  const frame: FigureFrame = {
    unit: '1',
    method: {
      name: 'chance of a sighting, local fit',
      formula: 'p = 1 / (1 + exp(−(b₀ + Σ b x)))',
      source: `logistic fit to ${count} observations at this place`,
      fromMemory: false,
      assumptions: [
        'holds for the beach and the watching of the time the observations were made',
        'sightings, not occurrences: what nobody saw is counted as no',
      ],
    },
    inputs: predictors.map((name, n) => input(name, values[n]?.value ?? 'not known', null, values[n]?.sd ?? null)),
    checks: [],
  }
  if (known.length < predictors.length) {
    const missing = predictors.filter((_, n) => values[n] === null).join(', ')
    return undetermined(frame, `${missing} not known`)
  }
  const outside = predictors.filter(
    (_, n) => known[n].value < observedRange[n].from || known[n].value > observedRange[n].to,
  )
  if (outside.length > 0) return undetermined(frame, `${outside.join(', ')} outside what was observed here`)
  const logit = (x: readonly number[]): number =>
    coefficients.reduce((sum, { value }, n) => sum + value * x[n], intercept.value)
  const centre = logit(known.map(({ value }) => value))
  const ofInputs = propagate(known, logit)
  const design = [1, ...known.map(({ value }) => value)]
  const size = design.length
  const ofFit = design.reduce(
    (sum, a, i) => sum + a * design.reduce((row, b, j) => row + covariance[i * size + j] * b, 0),
    0,
  )
  const sd = ofInputs === null ? null : Math.sqrt(ofInputs ** 2 + Math.max(0, ofFit))
  return determined(frame, {
    value: logistic(centre),
    likely: sd === null ? null : { from: logistic(centre - sd), to: logistic(centre + sd) },
    uncertaintyFrom: 'predictions, one standard deviation each, and the covariance of the fitted coefficients',
  })
}

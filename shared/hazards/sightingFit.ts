/**
 * Sightings (yes or no: a rip seen, water over the crest) against what was predicted: how often they came by bins of the lead prediction,
 * and a logistic fit that is held against the plain share of yes, each stretch of time predicted by the others.
 */
import { calibrationBins } from './calibration.ts'
import type { CalibrationBin } from './calibration.ts'
import { gainOf, predictUnseen } from './folds.ts'
import type { Gain } from './folds.ts'
import { chanceOf, fitLogistic } from './logisticFit.ts'
import { spreadOf } from './uncertain.ts'
import type { Coefficient, LogisticModel, LogisticRefusal, SightingRow } from './logisticFit.ts'

export interface Scores {
  /** Mean squared difference of chance and outcome (Brier 1950). */
  brier: number
  /** Mean −ln of the chance given to what came. */
  logLoss: number
}

export interface SightingFit {
  kind: 'sightings'
  count: number
  seen: number
  predictors: string[]
  intercept: Coefficient
  coefficients: Coefficient[]
  /** Of intercept and coefficients, row by row. */
  covariance: number[]
  /** Least and most of each predictor: beyond it the fit says nothing. */
  observedRange: { from: number; to: number }[]
  /** Share of yes by the first predictor, as predicted. */
  bins: CalibrationBin[]
  /** Cross-validated chances against share of yes: on the diagonal the fit is honest. */
  calibration: CalibrationBin[]
  /** Of the share of yes alone, and of the fit, both cross-validated. */
  withoutPrediction: Scores
  crossValidated: Scores
  /** Of the log loss. */
  gain: Gain
  /** Value of the only predictor at which a sighting is as likely as not; null with several, or where it lies outside what was observed. */
  evenChanceAt: Coefficient | null
}

/** Chances are kept off 0 and 1, so that one surprise does not cost without bound. */
const edge = 1e-6
const clipped = (chance: number): number => Math.min(1 - edge, Math.max(edge, chance))

export function scoresOf(chances: readonly number[], rows: readonly SightingRow[]): Scores {
  const count = rows.length
  return {
    brier: rows.reduce((sum, { seen }, n) => sum + (chances[n] - (seen ? 1 : 0)) ** 2, 0) / count,
    logLoss: losses(chances, rows).reduce((sum, one) => sum + one, 0) / count,
  }
}

const losses = (chances: readonly number[], rows: readonly SightingRow[]): number[] =>
  rows.map(({ seen }, n) => -Math.log(seen ? clipped(chances[n]) : 1 - clipped(chances[n])))

const shareSeen = (rows: readonly SightingRow[]): number => rows.filter(({ seen }) => seen).length / rows.length

/** Rows oldest first, each with a value for every predictor. */
export function fitSightings(
  rows: readonly SightingRow[],
  predictors: string[],
  parts: number,
): SightingFit | { refused: LogisticRefusal } {
  const model = fitLogistic(rows, predictors.length)
  if ('refused' in model) return model
  const unseen = predictUnseen(rows, parts, (seen) => {
    const found = fitLogistic(seen, predictors.length)
    return 'refused' in found ? null : (row) => chanceOf(found, row.values)
  })
  const plain = predictUnseen(rows, parts, (seen) => {
    const share = shareSeen(seen)
    return () => share
  })
  if (!unseen || !plain) return { refused: 'no answer' }
  const outcomes = rows.map(({ seen }) => (seen ? 1 : 0))
  return {
    kind: 'sightings',
    count: rows.length,
    seen: outcomes.filter((one) => one === 1).length,
    predictors,
    intercept: model.intercept,
    coefficients: model.coefficients,
    covariance: Array.from(model.covariance),
    observedRange: predictors.map((_, p) => spreadOf(rows.map(({ values }) => values[p]))),
    bins: calibrationBins(
      rows.map(({ values }) => values[0]),
      outcomes,
      'share',
    ),
    calibration: calibrationBins(unseen, outcomes, 'share'),
    withoutPrediction: scoresOf(plain, rows),
    crossValidated: scoresOf(unseen, rows),
    gain: gainOf(losses(plain, rows), losses(unseen, rows), parts),
    evenChanceAt: evenChance(model, rows),
  }
}

/** −b₀/b₁ with its standard error by the delta method. */
function evenChance(model: LogisticModel, rows: readonly SightingRow[]): Coefficient | null {
  if (model.coefficients.length !== 1) return null
  const slope = model.coefficients[0].value
  const value = -model.intercept.value / slope
  const observed = rows.map(({ values }) => values[0])
  if (!(value >= Math.min(...observed) && value <= Math.max(...observed))) return null
  const [byIntercept, bySlope] = [-1 / slope, -value / slope]
  const [c00, c01, , c11] = model.covariance
  const variance = byIntercept ** 2 * c00 + 2 * byIntercept * bySlope * c01 + bySlope ** 2 * c11
  return { value, standardError: Math.sqrt(variance) }
}

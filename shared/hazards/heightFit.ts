/**
 * Predicted against observed heights: bias, root mean square error, calibration, and one factor, observed = factor × predicted, by least
 * squares through the origin (no waves predicted are no waves). Its standard error allows for scatter that grows with height (HC3,
 * MacKinnon & White 1985).
 */
import { calibrationBins } from './calibration.ts'
import type { CalibrationBin } from './calibration.ts'
import { gainOf, predictUnseen } from './folds.ts'
import type { Gain } from './folds.ts'

export interface HeightPair {
  predicted: number
  observed: number
}

export interface Agreement {
  /** Mean of predicted − observed. */
  bias: number
  rmse: number
  /** rmse over the mean observed. */
  scatterIndex: number
  /** Pearson's; null where one side does not vary. */
  correlation: number | null
}

export function agreement(predicted: readonly number[], observed: readonly number[]): Agreement {
  const count = observed.length
  const mean = (values: readonly number[]): number => values.reduce((sum, one) => sum + one, 0) / count
  const [meanPredicted, meanObserved] = [mean(predicted), mean(observed)]
  const rmse = Math.sqrt(mean(observed.map((one, n) => (predicted[n] - one) ** 2)))
  const spread = (values: readonly number[], middle: number): number => mean(values.map((one) => (one - middle) ** 2))
  const scale = Math.sqrt(spread(predicted, meanPredicted) * spread(observed, meanObserved))
  const together = mean(observed.map((one, n) => (predicted[n] - meanPredicted) * (one - meanObserved)))
  return {
    bias: meanPredicted - meanObserved,
    rmse,
    scatterIndex: rmse / meanObserved,
    correlation: scale > 0 ? together / scale : null,
  }
}

export interface Factor {
  value: number
  standardError: number
}

/** Null without a prediction above zero. */
export function factorThroughOrigin(pairs: readonly HeightPair[]): Factor | null {
  const squares = pairs.reduce((sum, { predicted }) => sum + predicted * predicted, 0)
  if (!(squares > 0)) return null
  const value = pairs.reduce((sum, { predicted, observed }) => sum + predicted * observed, 0) / squares
  const scatter = pairs.reduce((sum, { predicted, observed }) => {
    const leverage = (predicted * predicted) / squares
    const residual = (observed - value * predicted) / Math.max(1e-9, 1 - leverage)
    return sum + (predicted * residual) ** 2
  }, 0)
  return { value, standardError: Math.sqrt(scatter) / squares }
}

export interface HeightFit {
  kind: 'heights'
  count: number
  asPredicted: Agreement
  /** With the factor, each stretch predicted by the others. */
  crossValidated: Agreement
  bins: CalibrationBin[]
  factor: Factor
  /** Of the mean squared error, in squared units of the height. */
  gain: Gain
}

/** Pairs oldest first. Null where no factor can be fitted. */
export function fitHeights(pairs: readonly HeightPair[], parts: number): HeightFit | null {
  const factor = factorThroughOrigin(pairs)
  const unseen = predictUnseen(pairs, parts, (seen) => {
    const found = factorThroughOrigin(seen)
    return found && ((pair) => found.value * pair.predicted)
  })
  if (!factor || !unseen) return null
  const predicted = pairs.map((pair) => pair.predicted)
  const observed = pairs.map((pair) => pair.observed)
  const squares = (of: readonly number[]): number[] => observed.map((one, n) => (of[n] - one) ** 2)
  return {
    kind: 'heights',
    count: pairs.length,
    asPredicted: agreement(predicted, observed),
    crossValidated: agreement(unseen, observed),
    bins: calibrationBins(predicted, observed, 'mean'),
    factor,
    gain: gainOf(squares(predicted), squares(unseen), parts),
  }
}

/** Fisher scoring (Fisher 1925; Longford 1987) of a sea model, damped so that the likelihood never falls. */
import { seaLikelihood } from './seaLikelihood.ts'
import type { Evaluation, SeaLikelihood } from './seaLikelihood.ts'
import type { SeaModel, SeaState } from './seaModel.ts'
import {
  copyState,
  currentAt,
  greatestSpread,
  leastLogDensity,
  leastSpread,
  noiseIndex,
  parameterCount,
  parametersPerSystem,
} from './seaModel.ts'
import { crossCurrentAt, depthAt, directionAt, spreadAt } from './seaModel.ts'
import { invertSymmetric, times } from './symmetric.ts'

export interface SeaFit {
  model: SeaModel
  state: SeaState
  evaluation: Evaluation
  /** Inverse of the information: covariance of the parameters were the model exact. */
  covariance: Float64Array
  converged: boolean
  iterations: number
}

export interface FitOptions {
  maxIterations: number
  /** Largest change, relative to each parameter's own scale, at which the fit has settled. */
  tolerance: number
}

/** Fully iterated: rotation of the axes or another order of sensors changes nothing above 1e-10. */
export const thorough: FitOptions = { maxIterations: 60, tolerance: 1e-11 }
/** For comparing starts and faults. */
export const quick: FitOptions = { maxIterations: 8, tolerance: 1e-4 }

/** Largest change in one iteration of direction, current, ln depth and ln spread. */
const largestStep: number[] = []
largestStep[directionAt] = 0.25
largestStep[currentAt] = 0.7
largestStep[depthAt] = 0.25
largestStep[spreadAt] = 0.6
largestStep[crossCurrentAt] = 0.7
const largestOtherStep = 1.5
/** Strongest current that is believed, m/s. */
const greatestCurrent = 3

/** Null where the likelihood cannot be evaluated from the start given. */
export function fitSea(model: SeaModel, start: SeaState, options: FitOptions): SeaFit | null {
  const likelihood = seaLikelihood(model)
  const count = parameterCount(model)
  let state = copyState(start)
  let evaluation = likelihood.evaluate(state)
  if (!Number.isFinite(evaluation.value)) return null
  let covariance = invertSymmetric(count, evaluation.information)
  let converged = false
  let previous: Float64Array | null = null
  let iterations = 0
  while (covariance && iterations < options.maxIterations) {
    iterations++
    const step = times(count, covariance, evaluation.gradient)
    hasten(step, previous, covariance, iterations)
    previous = step.slice()
    const largest = limit(model, step)
    const densityStep = likelihood.densityStep(evaluation, step)
    let share = 1
    let better: { state: SeaState; evaluation: Evaluation } | null = null
    for (let halving = 0; halving < 7 && !better; halving++) {
      const tried = move(model, state, step, densityStep, share)
      const found = likelihood.evaluate(tried)
      if (found.value >= evaluation.value - 1e-9 * Math.abs(evaluation.value))
        better = { state: tried, evaluation: found }
      share /= 2
    }
    if (!better) {
      // Densities that sink to nothing can spoil the joint step: they are settled alone, with the trains held.
      const settled = settleDensities(likelihood, model, state, evaluation)
      if (!settled) break
      state = settled.state
      evaluation = settled.evaluation
      covariance = invertSymmetric(count, evaluation.information)
      previous = null
      continue
    }
    state = better.state
    evaluation = better.evaluation
    covariance = invertSymmetric(count, evaluation.information)
    if (largest * share * 2 < options.tolerance) {
      converged = true
      break
    }
  }
  return covariance ? { model, state, evaluation, covariance, converged, iterations } : null
}

interface Place {
  state: SeaState
  evaluation: Evaluation
}

/** A step of the densities alone that raises the likelihood, or null. */
function settleDensities(
  likelihood: SeaLikelihood,
  model: SeaModel,
  state: SeaState,
  evaluation: Evaluation,
): Place | null {
  const still = new Float64Array(parameterCount(model))
  const densityStep = likelihood.densityStep(evaluation, still)
  for (const share of [1, 0.3, 0.1, 0.03]) {
    const tried = move(model, state, still, densityStep, share)
    const found = likelihood.evaluate(tried)
    if (found.value > evaluation.value + 1e-9 * Math.abs(evaluation.value)) return { state: tried, evaluation: found }
  }
  return null
}

/**
 * Scoring converges by a steady factor λ from step to step; every other step is lengthened by 1/(1 − λ) (Aitken 1926), λ taken along
 * the step in the metric of the parameters' own variances.
 */
function hasten(step: Float64Array, previous: Float64Array | null, covariance: Float64Array, iteration: number): void {
  if (!previous || iteration < 4 || iteration % 2 === 1) return
  let along = 0
  let square = 0
  for (let a = 0; a < step.length; a++) {
    const weight = 1 / covariance[a * step.length + a]
    along += weight * step[a] * previous[a]
    square += weight * previous[a] * previous[a]
  }
  const lambda = square > 0 ? Math.max(-0.6, Math.min(0.75, along / square)) : 0
  for (let a = 0; a < step.length; a++) step[a] /= 1 - lambda
}

/** Shortens an overlong step as a whole and returns its largest part relative to the parameter's scale. */
function limit(model: SeaModel, step: Float64Array): number {
  let over = 1
  let largest = 0
  for (let a = 0; a < step.length; a++) {
    const isSystem = a < noiseIndex(model)
    const bound = isSystem ? largestStep[a % parametersPerSystem] : largestOtherStep
    over = Math.max(over, Math.abs(step[a]) / bound)
    largest = Math.max(largest, Math.abs(step[a]))
  }
  for (let a = 0; a < step.length; a++) step[a] /= over
  return largest / over
}

function move(model: SeaModel, from: SeaState, step: Float64Array, densityStep: Float64Array, share: number): SeaState {
  const to = copyState(from)
  for (let a = 0; a < step.length; a++) to.parameters[a] += share * step[a]
  for (let j = 0; j < model.systems; j++) {
    const at = j * parametersPerSystem + spreadAt
    to.parameters[at] = Math.min(Math.log(greatestSpread), Math.max(Math.log(leastSpread), to.parameters[at]))
    const base = j * parametersPerSystem
    const depth = model.priors[base + depthAt].mean
    to.parameters[base + currentAt] = Math.min(
      greatestCurrent,
      Math.max(-greatestCurrent, to.parameters[base + currentAt]),
    )
    to.parameters[base + depthAt] = Math.min(depth + 0.8, Math.max(depth - 0.8, to.parameters[base + depthAt]))
  }
  const groups = model.bands.groups
  for (let n = 0; n < densityStep.length; n++) {
    const change = Math.min(1.5, Math.max(-1.5, densityStep[n]))
    const floor = leastLogDensity(model.bands, n % groups)
    to.logDensity[n] = Math.max(floor, to.logDensity[n] + share * change)
  }
  return to
}

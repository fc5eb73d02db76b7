/**
 * One window of one array becomes an estimate: check, spectra, trains, vectors, doubts. Pure: the same window gives the same answer,
 * whatever the axes and the order of the sensors.
 */
import type { EstimateResult } from '../schemas/estimate.ts'
import { leastAxisRatio } from './arrayGeometry.ts'
import { arraySpectra } from './arraySpectra.ts'
import type { ArraySpectra } from './arraySpectra.ts'
import { blankResult, refusalForData, refuse } from './blankResult.ts'
import { addHeights } from './heights.ts'
import { prepareArray } from './preparedArray.ts'
import type { PreparedArray } from './preparedArray.ts'
import { findRandomSea } from './randomSea.ts'
import { findRegularSea } from './regularSea.ts'
import { describeSea } from './describeSea.ts'
import type { ArrayWindow } from './window.ts'

/** ln L gained over unrelated sensors below which no wave is claimed; noise alone loses by this measure. */
const leastGain = 12
/** A heading less sure than this is none, degrees. */
const greatestHeadingSd = 25

/**
 * Errors: RangeError for a depth, gravity or sample rate not above zero. Everything else that can go wrong with readings is an
 * answer with a reason.
 */
export function estimate(window: ArrayWindow): EstimateResult {
  const prepared = prepareArray(window)
  const blank = blankResult(window, prepared)
  if (prepared.usable.length === 0) return refuse(blank, refusalForData(prepared))
  const spectra = arraySpectra(window, prepared)
  if (!spectra) return refuse(blank, 'too-little-data')
  const withHeights = addHeights(blank, window, prepared, spectra)
  if (prepared.usable.length < 3) return refuse(withHeights, refusalForData(prepared))
  if (prepared.frame.axisRatio < leastAxisRatio) return refuse(withHeights, 'collinear-array')
  return addVectors(withHeights, window, prepared, spectra)
}

function addVectors(
  result: EstimateResult,
  window: ArrayWindow,
  prepared: PreparedArray,
  spectra: ArraySpectra,
): EstimateResult {
  if ((result.significantWaveHeight ?? 0) < window.settings.leastHeight) return refuse(result, 'no-resolvable-wave')
  const regular = findRegularSea(window, prepared, spectra)
  if (regular) {
    const { residual, runnerUp } = regular
    return describeSea(result, window, prepared, spectra, [regular.train], {
      lagResidualRms: residual,
      runnerUp: null,
      ambiguous: runnerUp > 0.97,
    })
  }
  const sea = findRandomSea(spectra, prepared.frame, window.waterDepth, window.settings.gravity)
  if (!sea || sea.gain < leastGain) return refuse(result, 'no-resolvable-wave')
  if (Math.sqrt(sea.trains[0].directionVariance) * (180 / Math.PI) > greatestHeadingSd)
    return refuse(result, 'no-resolvable-wave')
  const { runnerUp } = sea.found
  return describeSea(result, window, prepared, spectra, sea.trains, {
    lagResidualRms: null,
    runnerUp,
    ambiguous: runnerUp !== null && runnerUp.ratio > 0.87 && runnerUp.likelihoodLoss < 6,
  })
}

/**
 * One window of one array becomes an estimate: check, spectra, trains, vectors, doubts. Pure: the same window gives the same answer,
 * whatever the axes and the order of the sensors.
 */
import type { EstimateResult } from '../schemas/estimate.ts'
import { leastAxisRatio } from './arrayGeometry.ts'
import { arrayDirections } from './arrayDirections.ts'
import { arraySpectra } from './arraySpectra.ts'
import { addBulkTests } from './bulkTests.ts'
import { blankResult, refusalForData, refuse } from './blankResult.ts'
import { addHeights } from './heights.ts'
import { checkArray, prepareArray } from './preparedArray.ts'
import { judgeNeighbours } from './neighbourTests.ts'
import { findRandomSea } from './randomSea.ts'
import type { RandomSea } from './randomSea.ts'
import { findRegularSea } from './regularSea.ts'
import { coherenceTest, describeSea } from './describeSea.ts'
import { blameFaults, doubtGeometry, judgeSensors } from './sensorVerdicts.ts'
import type { FaultVerdict } from './sensorVerdicts.ts'
import { judgeStanding } from './standingSea.ts'
import type { ArrayWindow } from './window.ts'

/** ln L gained over unrelated sensors below which no wave is claimed; noise alone loses by this measure. */
const leastGain = 12
/** Shorter records give no estimate, s; nor do those with fewer waves. */
const leastDuration = 60
const leastWaves = 15
/** A heading less sure than this is none, degrees. */
const greatestHeadingSd = 25

/**
 * Errors: RangeError for a depth, gravity or sample rate not above zero. Everything else that can go wrong with readings is an
 * answer with a reason.
 */
export function estimate(window: ArrayWindow): EstimateResult {
  const checked = checkArray(window)
  const faults: FaultVerdict[] = []
  let judging = true
  for (;;) {
    const leftOut = faults.map((verdict) => verdict.sensor)
    const prepared = prepareArray(window, checked, leftOut)
    const blank = blameFaults(blankResult(window, prepared), faults)
    if (prepared.usable.length === 0) return refuse(blank, refusalForData(prepared))
    const spectra = arraySpectra(window, prepared)
    if (!spectra || spectra.duration < leastDuration) return refuse(blank, 'too-little-data')
    const measured = addHeights(blank, window, prepared, spectra)
    let result = addBulkTests(judgeNeighbours(measured, window, checked, prepared, spectra), window, spectra)
    if (prepared.usable.length < 3)
      return refuse(result, faults.length > 0 ? 'geometry-doubtful' : refusalForData(prepared))
    if (prepared.frame.axisRatio < leastAxisRatio)
      return refuse(result, faults.length > 0 ? 'geometry-doubtful' : 'collinear-array')
    if ((result.significantWaveHeight ?? 0) < window.settings.leastHeight) return refuse(result, 'no-resolvable-wave')
    const { judged, stands } = judgeStanding(result, window, prepared, spectra)
    if (stands) return refuse(judged, 'standing-sea')
    result = judged
    const regular = findRegularSea(window, prepared, spectra)
    if (regular) return describeSea(result, window, prepared, spectra, [regular.train], regular.doubts)
    const sea = findRandomSea(spectra, prepared.frame, window.waterDepth, window.settings.gravity)
    if (!sea || sea.gain < leastGain || headingSd(sea) > greatestHeadingSd) return refuse(result, 'no-resolvable-wave')
    if (spectra.duration * sea.trains[0].peak < leastWaves) return refuse(result, 'too-little-data')
    const { fault, ambiguous } = judging ? judgeSensors(window, prepared, sea) : { fault: null, ambiguous: false }
    if (fault) {
      faults.push(fault)
      continue
    }
    if (ambiguous) return refuse(doubtGeometry(result), 'geometry-doubtful')
    const described = {
      ...describeSea(result, window, prepared, spectra, sea.trains, sea.doubts),
      directionalSpectrum: arrayDirections(spectra, prepared.frame, window.waterDepth, window.settings.gravity),
    }
    if (faults.length === 0 || !described.tests.some((test) => test.test === coherenceTest)) return described
    // Without the sensor blamed the sea is still not understood, so it was not the sensor.
    faults.length = 0
    judging = false
  }
}

const headingSd = (sea: RandomSea): number => Math.sqrt(sea.trains[0].directionVariance) * (180 / Math.PI)

/** Is the sea over the array one that stands or is thrown back? Then it has no single vector. */
import type { EstimateResult, QualityTest } from '../schemas/estimate.ts'
import type { ArraySpectra } from './arraySpectra.ts'
import { metresPerDecibar } from './arraySpectra.ts'
import { noiseDensity } from './bandMatrices.ts'
import { pressureResponse, waveNumber } from './dispersion.ts'
import { findOpposedTrains, isStanding, standingFrom } from './opposedTrains.ts'
import type { PreparedArray } from './preparedArray.ts'
import type { ArrayWindow } from './window.ts'

export const standingTest = 'standing sea'

/** The result with the test and, where the sea stands, the two trains. */
export function judgeStanding(
  result: EstimateResult,
  window: ArrayWindow,
  prepared: PreparedArray,
  spectra: ArraySpectra,
): { judged: EstimateResult; stands: boolean } {
  const { bands } = spectra
  const noise = noiseDensity(bands)
  let densest = 0
  for (let g = 1; g < bands.groups; g++)
    if (bands.density[g] - noise[g] > bands.density[densest] - noise[densest]) densest = g
  const peak = bands.frequency[densest]
  const { waterDepth: depth, settings } = window
  const k = waveNumber(2 * Math.PI * peak, depth, settings.gravity)
  const scale = prepared.frame.order.map((n) => {
    const sensor = window.sensors[prepared.usable[n]]
    return sensor.kind === 'surface' ? 1 : metresPerDecibar(window) / pressureResponse(k, depth, sensor.heightAboveBed)
  })
  const question = { spectra, frame: prepared.frame, scale, peak, depth, gravity: settings.gravity }
  const { found, without } = findOpposedTrains(question)
  const stands = isStanding(found, without)
  const test: QualityTest = {
    test: standingTest,
    flag: found === null ? 2 : stands ? 3 : 1,
    value: found?.phaseLock ?? null,
    limit: standingFrom.phaseLock,
    detail: wordsOf(found, stands),
  }
  return { judged: { ...result, tests: [...result.tests, test], opposedTrains: stands ? found : null }, stands }
}

function wordsOf(found: EstimateResult['opposedTrains'], stands: boolean): string {
  if (!found) return 'not evaluated: the array cannot tell a train from one against it'
  const share = `${Math.round(100 * found.amplitudeRatio)} % of the amplitude`
  return stands
    ? `${share} come back with locked phases at ${found.period.toFixed(1)} s: no single vector`
    : `no train comes back with locked phases (at most ${share} run against the waves)`
}

/**
 * What a wrong clock of a whole station does to an estimate. All sensors move together, so the vector is untouched,
 * but the time it stands for is not: over 1 s the estimate is suspect, over 10 s none is given.
 */
import type { EstimateResult, QualityTest } from '../schemas/estimate.ts'

/** Seconds of the station's clock less the server's from which an estimate is suspect, and is refused. */
export const suspectClockOffset = 1
export const refusedClockOffset = 10

function clockTest(offset: number): QualityTest {
  const size = Math.abs(offset)
  const flag = size > refusedClockOffset ? 4 : size > suspectClockOffset ? 3 : 1
  const limit = flag === 4 ? refusedClockOffset : suspectClockOffset
  return {
    test: 'station clock',
    flag,
    value: offset,
    limit,
    detail: `The station's clock differs from the server's by ${offset.toFixed(1)} s`,
  }
}

/** The estimate with the station's clock taken into account; `offset` null when it is not known, or not live. */
export function judgeStationClock(result: EstimateResult, offset: number | null): EstimateResult {
  if (offset === null) return result
  const test = clockTest(offset)
  const tests = [...result.tests, test]
  if (test.flag === 1) return { ...result, tests }
  if (test.flag === 3) {
    const flag = result.qualityFlag === 1 || result.qualityFlag === 2 ? 3 : result.qualityFlag
    return { ...result, tests, qualityFlag: flag }
  }
  return {
    ...withoutFigures(result),
    tests,
    reason: 'clock',
    qualityFlag: 4,
  }
}

type Verdicts = Pick<
  EstimateResult,
  'reason' | 'qualityFlag' | 'waterDepth' | 'waterDepthSource' | 'completeness' | 'sensors' | 'tests'
>

/** A window with nothing in it that would be read as a wave: what is left are the verdicts on its readings. */
export function withoutFigures(result: Verdicts): EstimateResult {
  return {
    ...result,
    resolved: false,
    significantWaveHeight: null,
    significantWaveHeightSd: null,
    peakPeriod: null,
    meanPeriod: null,
    energyPeriod: null,
    energyFlux: null,
    surgeHeight: null,
    surgeSpectrum: null,
    systems: [],
    traceSpeeds: [],
    subArrays: [],
    lagResidualRms: null,
    runnerUp: null,
    spectrum: null,
    directionalSpectrum: null,
    waveByWave: null,
    opposedTrains: null,
  }
}

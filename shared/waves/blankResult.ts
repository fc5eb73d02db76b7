/** The answer before anything is known of the waves, and the answer that says why nothing is. */
import type { EstimateResult, UnresolvedReason } from '../schemas/estimate.ts'
import type { PreparedArray } from './preparedArray.ts'
import { longWaves } from './surge.ts'
import type { ArrayWindow } from './window.ts'

export function blankResult(window: ArrayWindow, prepared: PreparedArray): EstimateResult {
  const surge = window.surge ? longWaves(window.surge.level, window.surge.sampleRate) : null
  return {
    resolved: false,
    reason: null,
    qualityFlag: 2,
    significantWaveHeight: null,
    significantWaveHeightSd: null,
    peakPeriod: null,
    meanPeriod: null,
    energyPeriod: null,
    energyFlux: null,
    surgeHeight: surge?.height ?? null,
    surgeSpectrum: surge?.spectrum ?? null,
    waterDepth: window.waterDepth,
    waterDepthSource: window.waterDepthSource,
    completeness: prepared.sensors.reduce((sum, s) => sum + s.completeness, 0) / Math.max(1, prepared.sensors.length),
    systems: [],
    sensors: prepared.sensors.map((sensor) => ({
      id: sensor.id,
      used: sensor.used,
      qualityFlag: sensor.flag,
      findings: sensor.findings,
      completeness: sensor.completeness,
      significantWaveHeight: null,
      clockOffset: null,
      clockOffsetSd: null,
      positionOffset: null,
      positionOffsetSd: null,
      waterDepth: null,
    })),
    traceSpeeds: [],
    tests: prepared.tests,
    subArrays: [],
    lagResidualRms: null,
    runnerUp: null,
    spectrum: null,
    directionalSpectrum: null,
    waveByWave: null,
    opposedTrains: null,
  }
}

/** The record is sound and the sea is what it is: of high interest rather than a fault. */
const seasOfInterest: UnresolvedReason[] = ['standing-sea', 'surf-zone']

/**
 * No vector: flag 9 when nothing came, 2 (not evaluated) when the record is sound but holds no wave that the array resolves, 3 for a sea
 * that has no single vector, else 4. What is known of height and period stays.
 */
export function refuse(result: EstimateResult, reason: UnresolvedReason): EstimateResult {
  const silent = result.completeness === 0
  return {
    ...result,
    resolved: false,
    reason,
    qualityFlag: silent ? 9 : reason === 'no-resolvable-wave' ? 2 : seasOfInterest.includes(reason) ? 3 : 4,
    systems: [],
    traceSpeeds: result.traceSpeeds,
  }
}

/** Why too few sensors are left: hardly any data at all, or the array itself. */
export function refusalForData(prepared: PreparedArray): UnresolvedReason {
  const reporting = prepared.sensors.filter((sensor) => sensor.completeness > 0)
  const share = reporting.reduce((sum, s) => sum + s.completeness, 0) / Math.max(1, reporting.length)
  return reporting.length >= 3 && share < 0.5 ? 'too-little-data' : 'too-few-sensors'
}

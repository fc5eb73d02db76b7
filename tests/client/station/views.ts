/** An estimate with all its detail, to be changed by each test. */
import type { EstimateResult } from '../../../shared/schemas/estimate.ts'
import type { EstimateView } from '../../../shared/schemas/station.ts'
import { estimate, swell } from '../support/views.ts'

export const detail = (changes: Partial<EstimateResult> = {}): EstimateResult => ({
  resolved: true,
  reason: null,
  qualityFlag: 1,
  significantWaveHeight: 2.4,
  significantWaveHeightSd: 0.1,
  peakPeriod: 12.4,
  meanPeriod: 8.1,
  energyPeriod: 10.2,
  energyFlux: 41_000,
  surgeHeight: null,
  surgeSpectrum: null,
  waterDepth: 14.2,
  waterDepthSource: 'tide',
  completeness: 1,
  systems: [swell()],
  sensors: ['OL-1', 'OL-2', 'OL-3', 'OL-4', 'OL-5'].map((id) => ({
    id,
    used: id !== 'OL-3',
    qualityFlag: id === 'OL-3' ? 4 : 1,
    findings: id === 'OL-3' ? ['spike'] : [],
    completeness: 1,
    significantWaveHeight: 2.3,
    clockOffset: null,
    clockOffsetSd: null,
    positionOffset: null,
    positionOffsetSd: null,
    waterDepth: null,
  })),
  traceSpeeds: [
    { between: ['OL-2', 'OL-1'], distance: 33, lag: -1.6, lagSd: 0.03, speed: 20, coherence: 0.9, residual: 0.02 },
    { between: ['OL-4', 'OL-5'], distance: 49, lag: 0, lagSd: 0.03, speed: null, coherence: 0.9, residual: 0.01 },
  ],
  tests: [
    { test: 'lag closure', flag: 1, value: 0.04, limit: 0.3, detail: 'all triples' },
    { test: 'dispersion ratio', flag: 1, value: 1.03, limit: 1.2, detail: 'swell' },
    { test: 'spike', flag: 3, value: 12, limit: 6, detail: 'OL-3: 4 samples' },
  ],
  subArrays: [
    { sensors: ['OL-1', 'OL-2', 'OL-4'], toward: 68.4, speed: 11.75, agrees: true },
    { sensors: ['OL-1', 'OL-4', 'OL-5'], toward: 66, speed: 11.5, agrees: true },
  ],
  lagResidualRms: 0.06,
  runnerUp: { toward: 112, speed: 7.2, ratio: 0.41 },
  spectrum: {
    frequency: [0.05, 0.08, 0.1, 0.2],
    density: [0.5, 12.1, 3, 0.2],
    degreesOfFreedom: 32,
    cutoff: 0.3,
    tail: null,
  },
  directionalSpectrum: null,
  waveByWave: null,
  opposedTrains: null,
  ...changes,
})

export const estimateView = (changes: Partial<EstimateView> = {}): EstimateView => ({
  ...estimate(),
  deploymentId: 1,
  settingsId: 7,
  softwareVersion: '0.1.0+4f2a',
  inputCommitId: 48_211,
  resultDigest: '9f2c51d0',
  note: null,
  detail: detail(),
  ...changes,
})

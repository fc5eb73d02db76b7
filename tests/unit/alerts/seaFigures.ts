/** A sea with everything that a test does not care about filled in. */
import type { SeaFigures, SystemFigures } from '../../../shared/alerts/figures.ts'

export const noSystem: SystemFigures = {
  height: null,
  period: null,
  toward: null,
  towardSd: null,
  speed: null,
  speedSd: null,
}

export const seaOf = (changes: Partial<SeaFigures> = {}): SeaFigures => ({
  resolved: true,
  reason: null,
  qualityFlag: 1,
  significantWaveHeight: 2,
  significantWaveHeightSd: 0.1,
  peakPeriod: 11,
  meanPeriod: 8,
  energyPeriod: 9,
  energyFlux: 18_000,
  surgeHeight: 0.06,
  leading: noSystem,
  swell: noSystem,
  windSea: noSystem,
  ...changes,
})

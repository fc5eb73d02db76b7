/** One wave system of an estimate, with everything a test does not care about filled in. */
import type { WaveSystem } from '../../shared/schemas/estimate.ts'

export interface SystemWanted {
  height: number
  period: number
  from: number
  spread?: number
  name?: 'swell' | 'wind sea'
}

export const waveSystem = (wanted: SystemWanted, key = 1): WaveSystem => ({
  key,
  name: wanted.name ?? 'swell',
  ...{ significantWaveHeight: wanted.height, significantWaveHeightSd: 0.05 * wanted.height, peakPeriod: wanted.period },
  ...{ from: wanted.from, toward: (wanted.from + 180) % 360, headingSd: 3, directionalSpread: wanted.spread ?? 13 },
  ...{
    measuredSpeed: 10,
    speed: 10,
    speedSd: 0.3,
    linearSpeed: 10,
    speedRatio: 1,
    slownessEast: 0,
    slownessNorth: 0.1,
  },
  slownessCovariance: { eastEast: 1e-6, eastNorth: 0, northNorth: 1e-6 },
  band: { from: 0.8 / wanted.period, to: 1.2 / wanted.period },
})

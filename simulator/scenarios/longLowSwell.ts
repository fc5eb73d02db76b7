import type { Scenario } from './scenario.ts'

export const longLowSwell: Scenario = {
  name: 'long-low-swell',
  summary: 'a swell of 0.4 m and 18 s from 250° T, spread 9°, on an otherwise smooth sea, steadily',
  systems: () => [
    {
      key: 'swell',
      name: 'swell',
      significantWaveHeight: 0.4,
      peakPeriod: 18,
      from: 250,
      directionalSpread: 9,
      peakedness: 5,
    },
  ],
}

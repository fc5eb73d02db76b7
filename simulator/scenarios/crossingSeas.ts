import type { Scenario } from './scenario.ts'

export const crossingSeas: Scenario = {
  name: 'crossing-seas',
  summary: 'a swell of 1.5 m, 13 s from 262° T and a wind sea of 1.4 m, 5.6 s from 188° T cross, steadily',
  systems: () => [
    {
      key: 'swell',
      name: 'swell',
      significantWaveHeight: 1.5,
      peakPeriod: 13,
      from: 262,
      directionalSpread: 12,
      peakedness: 5,
    },
    {
      key: 'wind sea',
      name: 'wind sea',
      significantWaveHeight: 1.4,
      peakPeriod: 5.6,
      from: 188,
      directionalSpread: 26,
      peakedness: 3.3,
    },
  ],
}

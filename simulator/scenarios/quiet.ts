import type { Scenario } from './scenario.ts'

/** One steady swell; nothing changes but the tide. Broad enough in frequency that twenty minutes tell its height well. */
export const quiet: Scenario = {
  name: 'quiet',
  summary: 'one steady swell, 1.2 m, 9.5 s, from 240° T, spread 10°',
  systems: () => [
    {
      key: 'swell',
      name: 'swell',
      significantWaveHeight: 1.2,
      peakPeriod: 9.5,
      from: 240,
      directionalSpread: 10,
      peakedness: 2,
    },
  ],
}

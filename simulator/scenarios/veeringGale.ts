import { swing } from './rhythm.ts'
import type { Scenario } from './scenario.ts'

export const veeringGale: Scenario = {
  name: 'veering-gale',
  summary:
    "a gale's sea grows from 0.8 to 3.4 m and veers from 195 to 290° T within 15 h, then eases; again every 30 h",
  systems(hours) {
    const blown = swing(hours, 30, 9)
    return [
      {
        key: 'wind sea',
        name: 'wind sea',
        significantWaveHeight: 0.8 + 2.6 * blown,
        peakPeriod: 4.8 + 3.9 * blown,
        from: 195 + 95 * blown,
        directionalSpread: 30 - 4 * blown,
        peakedness: 3.3,
      },
      {
        key: 'swell',
        name: 'swell',
        significantWaveHeight: 0.8,
        peakPeriod: 12.5,
        from: 246,
        directionalSpread: 13,
        peakedness: 5,
      },
    ]
  },
}

import { swing } from './rhythm.ts'
import type { Scenario } from './scenario.ts'

/** Long low forerunners first, then the body of the swell with shorter periods: long waves travel faster. */
export const swellArrival: Scenario = {
  name: 'swell-arrival',
  summary:
    "a distant storm's swell arrives, long forerunners first, peaks 6 h after the anchor and dies away; again every 36 h",
  systems(hours) {
    const phase = ((((hours + 12) % 36) + 36) % 36) - 12
    const arrived = swing(hours, 36, 6)
    return [
      {
        key: 'swell',
        name: 'swell',
        significantWaveHeight: 0.05 + 2.35 * arrived ** 1.5,
        peakPeriod: 14.2 - 2.8 * Math.sin((2 * Math.PI * (phase - 6)) / 36),
        from: 252,
        directionalSpread: 11 + 4 * arrived,
        peakedness: 5,
      },
      {
        key: 'wind sea',
        name: 'wind sea',
        significantWaveHeight: 0.7,
        peakPeriod: 5.4,
        from: 228,
        directionalSpread: 26,
        peakedness: 3.3,
      },
    ]
  },
}

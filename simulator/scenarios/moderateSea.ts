import type { OffshoreSystem } from './scenario.ts'

/** The steady sea under the scenarios of faults, so that the fault alone is what differs. */
export const moderateSea = (): OffshoreSystem[] => [
  {
    key: 'swell',
    name: 'swell',
    significantWaveHeight: 1.4,
    peakPeriod: 10.5,
    from: 244,
    directionalSpread: 13,
    peakedness: 3.3,
  },
  {
    key: 'wind sea',
    name: 'wind sea',
    significantWaveHeight: 0.6,
    peakPeriod: 5.4,
    from: 274,
    directionalSpread: 26,
    peakedness: 3.3,
  },
]

import { swing, wander } from './rhythm.ts'
import type { OffshoreSystem, Scenario } from './scenario.ts'

const days = 24

/** Weather comes and goes: weeks and seasons raise and lower the sea, and turn it, without a jump. 1 at the anchor. */
const weather = (hours: number): number =>
  Math.exp(
    0.34 * wander(hours, 6.3 * days) +
      0.26 * wander(hours, 16.9 * days) -
      0.3 * (1 - Math.cos((2 * Math.PI * hours) / (365.25 * days))),
  )

const turn = (hours: number): number => 7 * wander(hours, 9.1 * days) + 4 * wander(hours, 3.7 * days)

function swell(hours: number): OffshoreSystem {
  const built = swing(hours, 30, 3)
  const strength = weather(hours)
  return {
    key: 'swell',
    name: 'swell',
    significantWaveHeight: (0.95 + 1.27 * built) * strength,
    peakPeriod: (8 + 4.86 * built) * strength ** 0.2,
    from: 215 + 35.4 * built + turn(hours),
    directionalSpread: 18 - 4.5 * built,
    peakedness: 4,
  }
}

function windSea(hours: number): OffshoreSystem {
  const blown = swing(hours, 19, -1)
  const strength = weather(hours * 1.07)
  return {
    key: 'wind sea',
    name: 'wind sea',
    significantWaveHeight: (0.86 + 0.42 * blown) * strength,
    // Steep as a sea under its wind is; kept so as it grows: period goes with the root of height.
    peakPeriod: (4.7 + 0.7 * blown) * strength ** 0.5,
    from: 282 + 10.3 * blown + turn(hours * 1.3),
    directionalSpread: 27,
    peakedness: 3.3,
  }
}

/** The default: at the anchor a swell has built and veered for half a day across a westerly wind sea. */
export const demonstration: Scenario = {
  name: 'demonstration',
  summary:
    'a swell that builds, veers and lengthens over half a day across a wind sea, then eases; changing weather over weeks',
  systems: (hours) => [swell(hours), windSea(hours)],
}

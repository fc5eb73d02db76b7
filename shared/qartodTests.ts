/**
 * The tests of IOOS QARTOD that apply to water level (manual version 2.1, 2021) and to surface waves (version 2.1, 2019; its numbers and
 * classes are from memory) and the array's own, by the name under which an estimate carries them; and those not run, with the reason
 * that the manuals ask for.
 */
import type { QualityFlag, QualityTest } from './schemas/estimate.ts'

export interface KnownTest {
  /** As in `QualityTest.test`. */
  test: string
  title: string
  /** Numbers in the manuals: `water level 8, waves 16`; `array` for one of our own. */
  manual: string
  unit: string
}

const known = (test: string, title: string, manual: string, unit = ''): KnownTest => ({ test, title, manual, unit })

export const knownTests: readonly KnownTest[] = [
  known('gap', 'Timing and gap', 'water level 1, waves 9', 's'),
  known('instrument span', 'Gross range of the instrument', 'water level 4, waves 11', 'samples'),
  known('range', 'Range about the middle', 'water level 4, waves 11', 'samples'),
  known('climatology', 'Climatology of the depth', 'water level 5', 'm'),
  known('spike', 'Spike', 'water level 6, waves 10', 'samples'),
  known('rate', 'Rate of change', 'water level 7', 'sd'),
  known('flat line', 'Flat line', 'water level 8', 'samples'),
  known('attenuated signal', 'Attenuated signal', 'water level 10', 'm'),
  known('neighbour level', 'Neighbour, level', 'water level 11', 'm'),
  known('level drift', 'Level drift against the others', 'array', 'm'),
  known('segment shift', 'Segment shift', 'waves 12', 'm'),
  known('acceleration', 'Acceleration', 'waves 13', 'g'),
  known('percent good', 'Percent good', 'waves', 'share'),
  known('neighbour height', 'Neighbour, height by band', 'waves 14, in its place', 'share'),
  known('mean and deviation', 'Mean and standard deviation', 'waves 15', 'sd'),
  known('repeated figures', 'Flat line of the figures', 'waves 16', 'windows'),
  known('frequency range', 'Operational frequency range', 'waves 17', 'share'),
  known('low-frequency energy', 'Low-frequency energy', 'waves 18', 'share'),
  known('bulk limits', 'Bulk wave limits', 'waves 19', 'figures'),
  known('rate of change', 'Rate of change of the figures', 'waves 20', 'm'),
  known('lag closure', 'Lag closure', 'array', 's'),
  known('dispersion ratio', 'Speed over linear theory', 'array', ''),
  known('height over depth', 'Height over depth', 'array', ''),
  known('standing sea', 'Standing or reflected sea', 'array', 'lock'),
  known('sensor phases', 'Clock and position of a sensor', 'array', ''),
  known('coherence model', 'Coherence explained', 'array', 'share'),
  known('station clock', 'Clock of the station', 'array', 's'),
  known('computation', 'Computation', 'array', ''),
]

export interface TestNotRun {
  title: string
  manual: string
  reason: string
}

export const testsNotRun: readonly TestNotRun[] = [
  {
    title: 'Syntax',
    manual: 'water level 2',
    reason: 'run as each message arrives: one that is malformed is refused, put aside and counted with the link',
  },
  {
    title: 'Location',
    manual: 'water level 3',
    reason: 'the array is fixed: a sensor that has moved shows as position in the sensor phases',
  },
  { title: 'Multi-variate', manual: 'water level 9', reason: 'no second variable is measured at the sensors' },
  { title: 'Signal strength and its kin', manual: 'waves 1 to 8', reason: 'for acoustic instruments only' },
]

export interface TestLine extends KnownTest {
  flag: QualityFlag
  /** The worst of the test, over the sensors where it has one each. */
  worst: QualityTest
  good: number
  run: number
}

/** Fail before suspect before missing before good; 2 where nothing was evaluated. */
export function aggregateFlag(flags: readonly QualityFlag[]): QualityFlag {
  return ([4, 3, 9, 1] as const).find((flag) => flags.includes(flag)) ?? 2
}

/** One line a test in the order of the manuals; tests of a name that is not known follow. */
export function testLines(tests: readonly QualityTest[]): TestLine[] {
  const others = [...new Set(tests.map(({ test }) => test))].filter(
    (name) => !knownTests.some(({ test }) => test === name),
  )
  return [...knownTests, ...others.map((name) => known(name, name, 'array'))].flatMap((one) => {
    const own = tests.filter(({ test }) => test === one.test)
    if (own.length === 0) return []
    const flag = aggregateFlag(own.map((test) => test.flag))
    const worst = own
      .filter((test) => test.flag === flag)
      .reduce((best, test) => (excess(test) > excess(best) ? test : best))
    return [{ ...one, flag, worst, good: own.filter((test) => test.flag === 1).length, run: own.length }]
  })
}

const excess = ({ value, limit }: QualityTest): number =>
  value === null ? -Infinity : value / Math.max(1e-9, limit ?? 1)

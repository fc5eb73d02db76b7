import { describe, expect, it } from 'vitest'
import { addBulkTests, bulkLimitsTest } from '../../../shared/waves/bulkTests.ts'
import { arraySpectra } from '../../../shared/waves/arraySpectra.ts'
import { blankResult } from '../../../shared/waves/blankResult.ts'
import { addHeights } from '../../../shared/waves/heights.ts'
import { judgeNeighbours } from '../../../shared/waves/neighbourTests.ts'
import { checkArray, prepareArray } from '../../../shared/waves/preparedArray.ts'
import { defaultQualityLimits as limits } from '../../../shared/waves/qualityLimits.ts'
import { jumpMs, judgeAgainstPast } from '../../../shared/waves/recordTests.ts'
import { signalTests } from '../../../shared/waves/signalTests.ts'
import { withoutFigures } from '../../../shared/waves/stationClock.ts'
import type { ArrayWindow } from '../../../shared/waves/window.ts'
import { qualityLimits } from '../../../shared/schemas/qualityLimits.ts'
import { dice, fiveSensors, spreadSea } from './spreadSea.ts'

const rate = 4
const next = dice(8)
const healthy = Float64Array.from({ length: 4800 }, (_, n) => {
  const t = n / rate
  return 10 + 0.4 * Math.sin(0.78 * t) + 0.2 * Math.sin(1.1 * t + 1) + 0.02 * (next() - 0.5)
})
const flagsOf = (series: Float64Array, changes: Partial<typeof limits> = {}) =>
  Object.fromEntries(
    signalTests('A', series, series, rate, { ...limits, ...changes }).map(({ test, flag }) => [test, flag]),
  )

describe('the tests of one record', () => {
  it('find nothing in a healthy record, and say what was not evaluated', () => {
    expect(flagsOf(healthy)).toEqual({
      'instrument span': 2,
      'segment shift': 1,
      acceleration: 1,
      'attenuated signal': 1,
    })
  })

  it('fail samples that the instrument cannot measure', () => {
    expect(flagsOf(healthy, { instrumentSpan: [0, 20] })['instrument span']).toBe(1)
    expect(flagsOf(healthy, { instrumentSpan: [9.8, 20] })['instrument span']).toBe(4)
  })

  it('find a mean that shifts, and let the tide rise by five metres in six hours', () => {
    const tide = healthy.map((value, n) => value + (5 * n) / (6 * 3600 * rate))
    expect(flagsOf(tide)['segment shift']).toBe(1)
    expect(flagsOf(healthy.map((value, n) => value + (n > 2900 ? 0.8 : 0)))['segment shift']).toBe(3)
  })

  // Breaking limits a free surface to half of gravity (Longuet-Higgins 1969): 0.5 g.
  it('find an acceleration that no wave has, and not the noise of a fast instrument', () => {
    const kicked = healthy.map((value, n) => value + (n === 2000 ? 1.2 : 0))
    expect(flagsOf(kicked).acceleration).toBe(3)
    const noisy = healthy.map((value) => value + 0.4 * (next() - 0.5))
    expect(flagsOf(noisy).acceleration).toBe(1)
  })

  it('find a signal that is lost, in two steps', () => {
    const middle = 10
    expect(flagsOf(healthy.map((value) => middle + 0.004 * (value - middle)))['attenuated signal']).toBe(3)
    expect(flagsOf(healthy.map((value) => middle + 0.0004 * (value - middle)))['attenuated signal']).toBe(4)
  })
})

function neighbours(window: ArrayWindow) {
  const checked = checkArray(window)
  const prepared = prepareArray(window, checked)
  const spectra = arraySpectra(window, prepared)!
  const measured = addHeights(blankResult(window, prepared), window, prepared, spectra)
  return addBulkTests(judgeNeighbours(measured, window, checked, prepared, spectra), window, spectra)
}
const sea = spreadSea({
  seed: 4,
  toward: 70,
  peakPeriod: 8,
  height: 1.4,
  spread: 18,
  depth: 11,
  positions: fiveSensors,
})
const changed = (n: number, change: (value: number) => number): ArrayWindow => ({
  ...sea,
  series: sea.series.map((one, m) => (m === n ? one.map(change) : one)),
})

describe('a sensor against its neighbours', () => {
  it('is in keeping where all see one sea', () => {
    const { sensors, tests } = neighbours(sea)
    expect(sensors.flatMap(({ findings }) => findings)).toEqual([])
    expect(tests.filter(({ test }) => test.startsWith('neighbour')).length).toBeGreaterThanOrEqual(10)
    for (const { waterDepth } of sensors) expect(Math.abs((waterDepth ?? 0) - 11)).toBeLessThan(0.02)
  })

  it('that reads a fifth too high is named for its height and stays in use', () => {
    const { sensors } = neighbours(changed(2, (value) => 1.25 * value))
    expect(sensors.map(({ findings }) => findings)).toEqual([[], [], ['height'], [], []])
    expect(sensors[2]).toMatchObject({ used: true, qualityFlag: 3 })
  })

  it('whose level is off is named for its level, with the depth it says', () => {
    const { sensors } = neighbours(changed(4, (value) => value + 0.35))
    expect(sensors.map(({ findings }) => findings)).toEqual([[], [], [], [], ['level']])
    expect(sensors[4].waterDepth).toBeCloseTo(11.35, 1)
  })

  it('is not accused in a healthy array, whatever the sea', () => {
    for (let seed = 1; seed <= 12; seed++) {
      const order = { seed, toward: 37 * seed, peakPeriod: 4 + seed, height: 0.5 + 0.3 * seed, spread: 5 + 2 * seed }
      const { sensors } = neighbours(spreadSea({ ...order, depth: 11, positions: fiveSensors }))
      expect(sensors.flatMap(({ findings }) => findings)).toEqual([])
    }
  })
})

describe('the tests of the figures of a window', () => {
  const flagOf = (window: ArrayWindow, name: string) => neighbours(window).tests.find(({ test }) => test === name)
  const withLimits = (changes: Partial<typeof limits>): ArrayWindow => ({
    ...sea,
    waterDepthSource: 'level',
    settings: { ...sea.settings, quality: { ...limits, ...changes } },
  })

  it('hold the depth against the span of the station, where one is set', () => {
    expect(flagOf(sea, 'climatology')).toMatchObject({ flag: 2 })
    expect(flagOf(withLimits({ depthSpan: [9, 14] }), 'climatology')).toMatchObject({ flag: 1, value: 11 })
    expect(flagOf(withLimits({ depthSpan: [12, 14] }), 'climatology')).toMatchObject({ flag: 3, limit: 12 })
  })

  it('tell energy of very long waves, and what the band leaves out', () => {
    expect(flagOf(sea, 'low-frequency energy')).toMatchObject({ flag: 1 })
    const long = spreadSea({ seed: 6, toward: 70, peakPeriod: 23, height: 1, spread: 8, depth: 11, positions: fiveSensors }) // prettier-ignore
    expect(flagOf(long, 'low-frequency energy')).toMatchObject({ flag: 3 })
    expect(flagOf(sea, 'frequency range')).toMatchObject({ flag: 1 })
    const cut = { ...sea, settings: { ...sea.settings, bandTo: 0.135 } }
    expect(flagOf(cut, 'frequency range')).toMatchObject({ flag: 3 })
  })

  it('name each figure that cannot be', () => {
    const result = { ...neighbours(sea), significantWaveHeight: 7 }
    expect(bulkLimitsTest(result, limits)).toMatchObject({ flag: 3, value: 1, detail: 'height 7.00 m above 6.60 m' })
    expect(bulkLimitsTest(neighbours(sea), limits)).toMatchObject({ flag: 1, value: 0 })
  })
})

describe('an estimate against those before it', () => {
  const now = Date.UTC(2026, 11, 1, 12)
  const bare = withoutFigures({
    reason: null,
    qualityFlag: 1,
    waterDepth: 11,
    waterDepthSource: 'level',
    completeness: 1,
    sensors: [],
    tests: [],
  })
  const of = (height: number, period = 9) => ({ ...bare, significantWaveHeight: height, peakPeriod: period })
  const past = Array.from({ length: 48 }, (_, n) => ({
    at: now - (n + 1) * jumpMs,
    significantWaveHeight: 1.2 + 0.1 * Math.sin(n),
    peakPeriod: 9,
    toward: 70,
  }))
  const flags = (result: ReturnType<typeof judgeAgainstPast>) => result.tests.map(({ test, flag }) => [test, flag])

  it('passes where it is as it was, and is not evaluated where nothing was', () => {
    expect(flags(judgeAgainstPast(of(1.3), past, now, limits))).toEqual([
      ['mean and deviation', 1],
      ['repeated figures', 1],
      ['rate of change', 1],
    ])
    expect(flags(judgeAgainstPast(of(1.3), [], now, limits)).map(([, flag]) => flag)).toEqual([2, 1, 2])
    expect(judgeAgainstPast(of(1.3), past, now, limits).qualityFlag).toBe(1)
  })

  it('is of high interest after a jump of height or period, and stays shown', () => {
    const jumped = judgeAgainstPast(of(2.6), past, now, limits)
    expect(flags(jumped)).toEqual([
      ['mean and deviation', 3],
      ['repeated figures', 1],
      ['rate of change', 3],
    ])
    expect(jumped).toMatchObject({ qualityFlag: 3, significantWaveHeight: 2.6 })
    expect(judgeAgainstPast(of(1.2, 16), past, now, limits).tests[2]).toMatchObject({ flag: 3, detail: expect.stringContaining('peak period by 7.0 s') }) // prettier-ignore
  })

  it('is told and not doubted where it is far from the usual and rose by and by, as in a gale', () => {
    const rising = past.map((one) => (one.at >= now - 2 * jumpMs ? { ...one, significantWaveHeight: 2.4 } : one))
    const gale = judgeAgainstPast(of(2.6), rising, now, limits)
    expect(flags(gale)[0]).toEqual(['mean and deviation', 3])
    expect(gale.qualityFlag).toBe(1)
  })

  it('fails where the very same height comes again and again', () => {
    const same = (count: number) =>
      judgeAgainstPast(
        of(1.234567),
        Array.from({ length: count }, (_, n) => ({
          ...past[0],
          at: now - (n + 1) * 60_000,
          significantWaveHeight: 1.234567,
        })),
        now,
        limits,
      )
    expect([1, 2, 4].map((count) => same(count).tests[1].flag)).toEqual([1, 3, 4])
    expect(same(4).qualityFlag).toBe(4)
  })

  it('never makes a refused estimate look better', () => {
    expect(judgeAgainstPast({ ...of(2.6), qualityFlag: 2 }, past, now, limits).qualityFlag).toBe(2)
  })
})

describe('the thresholds of a station', () => {
  it('have usual values that the shape of the settings accepts', () => {
    expect(qualityLimits.parse(limits)).toEqual(limits)
    expect(qualityLimits.safeParse({ ...limits, depthSpan: [14, 9] }).success).toBe(false)
  })
})

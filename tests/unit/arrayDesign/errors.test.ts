/** Expected errors against closed forms and against a bound worked out apart from the program. */
import { describe, expect, test } from 'vitest'
import { checkDesign } from '../../../shared/arrayDesign/checkDesign.ts'
import { coherencesOf, directionBounds } from '../../../shared/arrayDesign/directionBound.ts'
import type { SeaLine } from '../../../shared/arrayDesign/directionBound.ts'
import { baselines } from '../../../shared/arrayDesign/falsePeaks.ts'
import { clockSkewAllowed, systematicErrors } from '../../../shared/arrayDesign/systematicErrors.ts'
import type { GridPosition } from '../../../shared/geodesy.ts'
import { cramerRaoBound } from '../../bench/cramerRao.ts'
import { linearWaveNumber } from '../../bench/seededSea.ts'
import { draftOf, questionOf } from './arrays.ts'

const at = (...places: [number, number][]): GridPosition[] => places.map(([east, north]) => ({ east, north }))

/** A flat band of a wave that is not dispersive, with the same noise on all sensors. */
function flatSea(count: number, from: number, to: number, ratio: number, slowness: number): SeaLine[] {
  const lines = 400
  const width = (to - from) / lines
  return Array.from({ length: lines }, (_, n) => lineAt(from + (n + 0.5) * width, width, count, ratio, slowness))
}

const lineAt = (frequency: number, width: number, count: number, ratio: number, slowness: number): SeaLine => ({
  width,
  density: ratio,
  noise: Array.from({ length: count }, () => 1),
  waveNumber: 2 * Math.PI * frequency * slowness,
})

const boundsOf = (sensors: GridPosition[], lines: SeaLine[], toward: number, seconds: number, spread = 0) =>
  directionBounds(coherencesOf(sensors, lines, toward, spread, baselines(sensors).longest), lines, seconds)

const longCrested = (sensors: GridPosition[], lines: SeaLine[], toward: number, seconds: number) =>
  boundsOf(sensors, lines, toward, seconds)[0]

describe('the bound of a long-crested train', () => {
  const array = at([0, 0], [12, 0], [3, 14], [-9, 7])
  const [east, north] = [0.09, -0.05]
  const slowness = Math.hypot(east, north)

  /** Four sensors, T = 200 s, the 25 lines from 0.08 to 0.20 Hz, s = (0.09, -0.05) s/m: checked by Monte Carlo elsewhere. */
  test.each([
    [10, 0.00349, 0.0045],
    [1, 0.01217, 0.01573],
    [0.3, 0.02691, 0.03477],
  ])('at signal over noise %d is that of the closed form in slowness', (ratio, wantedEast, wantedNorth) => {
    const toward = Math.atan2(north, east)
    const lines = Array.from({ length: 25 }, (_, n) => lineAt(0.08 + n / 200, 1 / 200, 4, ratio, slowness))
    const bound = longCrested(array, lines, toward, 200)
    if (!bound) throw new Error('no bound')
    // ds = |s| (n dθ - u d ln c), with n to the left of u.
    const [cos, sin] = [Math.cos(toward), Math.sin(toward)]
    const { direction, logSpeed, cross } = bound
    const varEast = slowness ** 2 * (sin * sin * direction + cos * cos * logSpeed + 2 * sin * cos * cross)
    const varNorth = slowness ** 2 * (cos * cos * direction + sin * sin * logSpeed - 2 * sin * cos * cross)
    expect(Math.sqrt(varEast)).toBeCloseTo(wantedEast, 4)
    expect(Math.sqrt(varNorth)).toBeCloseTo(wantedNorth, 4)
  })

  /** T = 1200 s, 20 m square, 0.08-0.12 Hz, 8 m/s; coherence² 0.95, 0.80, 0.50 by noise alone. */
  test.each([
    [0.95, 0.084, 0.6],
    [0.8, 0.18, 1.3],
    [0.5, 0.35, 2.5],
  ])('over a 20 m square at coherence² %d is the worked example', (squared, speedSd, headingSd) => {
    const coherence = Math.sqrt(squared)
    const square = at([0, 0], [20, 0], [20, 20], [0, 20])
    const bound = longCrested(square, flatSea(4, 0.08, 0.12, coherence / (1 - coherence), 1 / 8), 0.4, 1200)
    expect(8 * Math.sqrt(bound?.logSpeed ?? 0)).toBeCloseTo(speedSd, 2)
    expect((Math.sqrt(bound?.direction ?? 0) * 180) / Math.PI).toBeCloseTo(headingSd, 1)
  })

  test.each([3, 4, 5, 7])('is the same in every direction over a regular polygon of %d', (count) => {
    const polygon = Array.from({ length: count }, (_, n) => ({
      east: 9 * Math.cos((2 * Math.PI * n) / count),
      north: 9 * Math.sin((2 * Math.PI * n) / count),
    }))
    const lines = flatSea(count, 0.08, 0.12, 5, 1 / 8)
    const all = [0, 0.3, 1.1, 2, 4].map((toward) => longCrested(polygon, lines, toward, 1200))
    for (const bound of all) {
      expect((bound?.direction ?? 0) / (all[0]?.direction ?? 1)).toBeCloseTo(1, 9)
      expect((bound?.direction ?? 0) / (bound?.logSpeed ?? 1)).toBeCloseTo(1, 9)
      expect((bound?.cross ?? 1) / (bound?.direction ?? 1)).toBeCloseTo(0, 9)
    }
  })

  test('cannot be determined on a line or with two sensors', () => {
    expect(longCrested(at([0, 0], [10, 0], [25, 0]), flatSea(3, 0.08, 0.12, 5, 1 / 8), 0.4, 1200)).toBeNull()
    expect(longCrested(at([0, 0], [10, 0]), flatSea(2, 0.08, 0.12, 5, 1 / 8), 0.4, 1200)).toBeNull()
  })
})

test('the bound of a short-crested train is that of derivatives by differences, to a per cent', () => {
  const positions = at([0, 0], [22, 3], [5, 19], [-12, -9])
  const density = (frequency: number): number => 3 * Math.exp(-(((frequency - 0.1) / 0.02) ** 2))
  const shape = { depth: 9, seconds: 1200, toward: 70, spread: 22, noise: 0.002, from: 0.07, to: 0.14 }
  const wanted = cramerRaoBound({ ...shape, positions, density })
  const lines = Array.from({ length: 60 }, (_, n) => {
    const frequency = 0.07 + (n + 0.5) * (0.07 / 60)
    return { width: 0.07 / 60, density: density(frequency), noise: [0.002, 0.002, 0.002, 0.002], waveNumber: linearWaveNumber(2 * Math.PI * frequency, 9) } // prettier-ignore
  })
  const [toward, spread] = [(20 * Math.PI) / 180, (22 * Math.PI) / 180]
  const [bound] = boundsOf(positions, lines, toward, 1200, spread)
  expect((Math.sqrt(bound?.direction ?? 0) * 180) / Math.PI / wanted.heading).toBeCloseTo(1, 2)
  expect(Math.sqrt(bound?.logSpeed ?? 0) / wanted.logSpeed).toBeCloseTo(1, 2)
})

test.each([0, 0.4])('without a sensor the bound is that of the smaller array, spread %d', (spread) => {
  const five = at([0, 0], [12, 0], [3, 14], [-9, 7], [-6, -11])
  const [, ...without] = boundsOf(five, flatSea(5, 0.08, 0.12, 5, 1 / 8), 0.4, 1200, spread)
  five.forEach((_, left) => {
    const four = five.filter((_, n) => n !== left)
    const [alone] = boundsOf(four, flatSea(4, 0.08, 0.12, 5, 1 / 8), 0.4, 1200, spread)
    for (const field of ['direction', 'logSpeed', 'cross'] as const) {
      expect((without[left]?.[field] ?? NaN) / (alone?.[field] ?? 1)).toBeCloseTo(1, 6)
    }
  })
})

/** c = 7.5 m/s over a baseline of 20 m: along the wave c dt/b of the speed, across it c dt/b rad of the heading. */
describe('a clock that is off', () => {
  const corner = (clockSd: number) =>
    at([0, 0], [20, 0], [0, 20]).map((place, n) => ({ ...place, positionSd: 0, clockSd: n === 1 ? clockSd : 0 }))
  test.each([
    [0.01, 0.4, 0.2],
    [0.05, 1.9, 1.1],
    [0.1, 3.8, 2.1],
    [0.5, 19, 11],
  ])('by %d s moves speed along its baseline and heading across it', (clockSd, speedPercent, headingDegrees) => {
    const along = systematicErrors(corner(clockSd), 0, 7.5)
    const across = systematicErrors(corner(clockSd), Math.PI / 2, 7.5)
    expect(100 * Math.sqrt(along?.logSpeed ?? 0)).toBeCloseTo(speedPercent, speedPercent < 5 ? 1 : 0)
    expect((180 / Math.PI) * Math.sqrt(across?.direction ?? 0)).toBeCloseTo(headingDegrees, headingDegrees < 5 ? 1 : 0)
    expect(along?.direction).toBeCloseTo(0, 12)
  })

  test('may be off until it turns a heading by the turn asked for', () => {
    // The corner's own sensor weighs √2 / 20 m.
    expect(clockSkewAllowed(corner(0), 7.5, 0.01)).toBeCloseTo((0.01 * 20) / (7.5 * Math.SQRT2), 9)
    expect(clockSkewAllowed(at([0, 0], [1, 0], [2, 0]), 7.5, 0.01)).toBeNull()
  })
})

/** 0.2 m on 20 m: 1 % of the speed. */
test('a position that is off along the wave moves the speed by its share of the baseline', () => {
  const sensors = at([0, 0], [20, 0], [0, 20]).map((place, n) => ({
    ...place,
    positionSd: n === 1 ? 0.2 : 0,
    clockSd: 0,
  }))
  expect(Math.sqrt(systematicErrors(sensors, 0, 7.5)?.logSpeed ?? 0)).toBeCloseTo(0.01, 9)
})

/** Half-wave lengths in 8 m: 17.4 m at 5 s, 32.5 m at 8 s, 41.9 m at 10 s. */
test.each([
  [17.4, 5],
  [32.5, 8],
  [41.9, 10],
])('a shortest baseline of %d m is half a wave of %d s', (side, period) => {
  const check = checkDesign(draftOf([[0, 0], [side, 0], [0, side]]), questionOf({ waterDepth: 8 })) // prettier-ignore
  expect(check.halfWavePeriod).toBeCloseTo(period, 1)
})

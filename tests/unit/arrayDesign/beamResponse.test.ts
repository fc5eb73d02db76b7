/** Beams against closed forms: pair, right angle, square, line. */
import { expect, test } from 'vitest'
import { beamPlan, beamPower } from '../../../shared/arrayDesign/beamResponse.ts'
import { baselines, sweepFalsePeaks, worstFalsePeakAt } from '../../../shared/arrayDesign/falsePeaks.ts'
import type { GridPosition } from '../../../shared/geodesy.ts'

const at = (...places: [number, number][]): GridPosition[] => places.map(([east, north]) => ({ east, north }))
const question = { waterDepth: 8, gravity: 9.81, periodFrom: 4, periodTo: 16, openSeaSector: null }

test('the beam of a pair is cos² of half its phase', () => {
  const pair = at([0, 0], [20, 0])
  for (const k of [0, 0.03, 0.1, 0.2]) expect(beamPower(pair, k, 0.7)).toBeCloseTo(Math.cos((k * 20) / 2) ** 2, 12)
})

test('the beam of a right angle is (3 + 2 cos a + 2 cos b + 2 cos(a − b)) / 9', () => {
  const corner = at([0, 0], [30, 0], [0, 40])
  for (const [kx, ky] of [
    [0.02, 0.05],
    [-0.11, 0.07],
    [0.3, -0.2],
  ]) {
    const [a, b] = [kx * 30, ky * 40]
    const closed = (3 + 2 * Math.cos(a) + 2 * Math.cos(b) + 2 * Math.cos(a - b)) / 9
    expect(beamPower(corner, kx, ky)).toBeCloseTo(closed, 12)
  }
})

test('a square of side a repeats at 2π/a along its axes', () => {
  const square = at([0, 0], [25, 0], [25, 25], [0, 25])
  expect(beamPower(square, (2 * Math.PI) / 25, 0)).toBeCloseTo(1, 12)
  expect(beamPower(square, 0.05, 0.07)).toBeLessThan(1)
})

test('turning an array and the wave together changes nothing', () => {
  const array = at([0, 0], [12, 0], [3, 14], [-9, 7])
  const [cos, sin] = [Math.cos(0.7), Math.sin(0.7)]
  const turned = array.map(({ east, north }) => ({ east: cos * east - sin * north, north: sin * east + cos * north }))
  expect(beamPower(turned, cos * 0.1 - sin * 0.05, sin * 0.1 + cos * 0.05)).toBeCloseTo(beamPower(array, 0.1, 0.05), 12)
})

test('a line of sensors reads every wave from its mirror image as well', () => {
  const line = at([0, 0], [7, 0], [17, 0], [29, 0])
  const some = worstFalsePeakAt(line, 8, { ...question, openSeaSector: [195, 225] }, 29)
  expect(some?.power).toBeCloseTo(1, 9)
  expect(((540 - (some?.from ?? 0)) % 360) - (some?.readsFrom ?? 0)).toBeCloseTo(0, 9)
})

/** A half-wave length in 8 m: 17.4 m at 5 s. A pair nearer than that has one peak for waves along it. */
test('a small triangle mistakes nothing over its whole range, a wide square does at short periods', () => {
  expect(sweepFalsePeaks(at([0, 0], [5, 0], [2, 5]), question).aliasFreePeriod).toBeCloseTo(4, 9)
  const wide = sweepFalsePeaks(at([0, 0], [60, 0], [60, 60], [0, 60]), question)
  expect(wide.worst?.power).toBeGreaterThan(0.99)
  expect(wide.aliasFreePeriod).toBeGreaterThan(8)
})

/**
 * Of a right angle with legs of a half-wave length the waves along both legs' bisector and against it: phases π/√2 each way. The
 * false peak is where a + b turns by 2π: worked out by hand from the closed form above on the ring.
 */
test('the false peak of a right angle lies where its closed form has it', () => {
  const [leg, period] = [60, 6]
  const corner = at([0, 0], [leg, 0], [0, leg])
  const peak = worstFalsePeakAt(corner, period, { ...question, openSeaSector: [0, 359.9] }, leg * Math.SQRT2)
  const k = (2 * Math.PI) / 45.224
  const [from, reads] = [peak?.from ?? 0, peak?.readsFrom ?? 0].map((degrees) => ((degrees + 180) * Math.PI) / 180)
  const a = k * leg * (Math.sin(reads) - Math.sin(from))
  const b = k * leg * (Math.cos(reads) - Math.cos(from))
  expect(peak?.power).toBeCloseTo((3 + 2 * Math.cos(a) + 2 * Math.cos(b) + 2 * Math.cos(a - b)) / 9, 3)
})

test('the plan of a beam has its peak where the wave goes', () => {
  const plan = beamPlan(
    at([0, 0], [12, 0], [3, 14], [-9, 7]),
    { period: 6, from: 270, waterDepth: 8, gravity: 9.81 },
    65,
  )
  const highest = plan.power.indexOf(Math.max(...plan.power))
  // Toward east: in the middle row, half way between centre and the right edge.
  expect([Math.floor(highest / 65), highest % 65]).toEqual([32, 48])
  expect(plan.ring).toBeCloseTo((2 * Math.PI) / 45.224, 4)
})

test('baselines of a pair are its distance, of one sensor nothing', () => {
  expect(baselines(at([0, 0], [3, 4]))).toEqual({ longest: 5, shortest: 5 })
  expect(baselines(at([0, 0]))).toEqual({ longest: 0, shortest: 0 })
})

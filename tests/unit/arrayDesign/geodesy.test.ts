import { expect, test } from 'vitest'
import { placeSensors } from '../../../shared/arrayDesign/placeSensors.ts'
import { geographicPositionOf, gridPositionOf, rangeAndBearing } from '../../../shared/geodesy.ts'
import type { DraftSensor, SensorPosition } from '../../../shared/schemas/stationSetUpDeployments.ts'

/** WGS 84: a = 6,378,137 m, so a degree along the equator is a π/180; quarter meridian 10,001,965.729 m (published constant). */
test('ranges on the ellipsoid are those of WGS 84 along equator and meridian', () => {
  const equator = gridPositionOf({ latitude: 0, longitude: 10 }, { latitude: 0, longitude: 11 })
  expect(equator.east).toBeCloseTo((6_378_137 * Math.PI) / 180, 6)
  expect(equator.north).toBeCloseTo(0, 6)
  const meridian = gridPositionOf({ latitude: 0, longitude: 10 }, { latitude: 90, longitude: 10 })
  expect(meridian.north).toBeCloseTo(10_001_965.729, 3)
})

test.each([
  [47.5, -21],
  [-33.2, 151.4],
  [71, 179.9999],
])('a position on the grid of %d, %d comes back from latitude and longitude to a micrometre', (latitude, longitude) => {
  const position = { east: -431.27, north: 268.4 }
  const back = gridPositionOf({ latitude, longitude }, geographicPositionOf({ latitude, longitude }, position))
  expect(back.east).toBeCloseTo(position.east, 6)
  expect(back.north).toBeCloseTo(position.north, 6)
})

test('a latitude beyond the pole is refused', () => {
  expect(() => gridPositionOf({ latitude: 91, longitude: 0 }, { latitude: 0, longitude: 0 })).toThrow(RangeError)
})

test('a bearing is told clockwise from north', () => {
  const { range, bearing } = rangeAndBearing({ east: 0, north: 0 }, { east: 3, north: -4 })
  expect(range).toBe(5)
  expect(bearing).toBeCloseTo(180 - (Math.atan2(3, 4) * 180) / Math.PI, 9)
})

const sensor = (letter: string, position: SensorPosition): DraftSensor => ({
  letter,
  serial: `S${letter}`,
  kind: 'pressure',
  position,
  heightAboveBed: 0.5,
  positionSd: 0.05,
  clockSd: 0.002,
  scale: 1,
  offset: 0,
  pressureKind: 'gauge',
})

test('sensors surveyed in three ways stand on one grid', () => {
  const origin = { latitude: 47.5, longitude: -21 }
  const geographic = geographicPositionOf(origin, { east: 12, north: -7 })
  const { placed, faults } = placeSensors(origin, [
    sensor('A', { by: 'grid', east: 1, north: 2 }),
    sensor('B', { by: 'geographic', ...geographic }),
    sensor('C', { by: 'polar', range: 10, bearing: 90, from: 'A' }),
    sensor('D', { by: 'polar', range: 5, bearing: 180, from: null }),
  ])
  expect(faults).toEqual([])
  expect(placed.map(({ east, north }) => [east.toFixed(4), north.toFixed(4)])).toEqual([
    ['1.0000', '2.0000'],
    ['12.0000', '-7.0000'],
    ['11.0000', '2.0000'],
    ['0.0000', '-5.0000'],
  ])
})

test('bearings that go round in a circle or begin at nothing are faults of their sensors alone', () => {
  const { placed, faults } = placeSensors({ latitude: 47.5, longitude: -21 }, [
    sensor('A', { by: 'polar', range: 1, bearing: 0, from: 'B' }),
    sensor('B', { by: 'polar', range: 1, bearing: 0, from: 'A' }),
    sensor('C', { by: 'polar', range: 1, bearing: 0, from: 'Z' }),
    sensor('D', { by: 'grid', east: 0, north: 0 }),
  ])
  expect(placed.map(({ letter }) => letter)).toEqual(['D'])
  expect(faults).toEqual([
    { index: 0, reason: 'the bearings from A, B go round in a circle' },
    { index: 1, reason: 'the bearings from B, A go round in a circle' },
    { index: 2, reason: 'there is no sensor Z to measure from' },
  ])
})

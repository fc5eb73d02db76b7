/** Which level and which pressure of the air a window is computed with. */
import { beforeAll, beforeEach, expect, test } from 'vitest'
import { AuxiliaryReading } from '../../server/models/index.ts'
import { airPressureAt, tideLevelAt } from '../../server/services/estimates/levels.ts'
import { makeStation } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

const noon = Date.parse('2026-12-01T12:00:00Z')
const minute = 60_000
let parts: TestParts
let stationId: number

beforeAll(async () => {
  parts = await testParts()
})
beforeEach(async () => {
  stationId = (await makeStation(parts.clock)).station.id
})

type Kind = AuxiliaryReading['kind']
const put = (kind: Kind, minutes: number, value: number, qualityFlag = 1) =>
  AuxiliaryReading.create({ stationId, kind, takenAt: new Date(noon + minutes * minute), value, sd: null, qualityFlag, importId: null }) // prettier-ignore

test('between two hours of a tide table the level lies on a line', async () => {
  await put('tide', -40, 1)
  await put('tide', 20, 2.2)
  expect(await tideLevelAt(parts, stationId, noon)).toBeCloseTo(1.8, 9)
})

test('a measured level goes before the table, unless it is old or failed', async () => {
  await put('tide', -10, 1)
  await put('tide', 10, 1)
  await put('waterLevel', -20, 1.4)
  expect(await tideLevelAt(parts, stationId, noon)).toBe(1.4)
  expect(await tideLevelAt(parts, stationId, noon + 11 * minute)).toBe(1)
  await put('waterLevel', -1, 99, 4)
  expect(await tideLevelAt(parts, stationId, noon)).toBe(1.4)
})

test('a single value counts for half an hour, one of the barometer for three', async () => {
  await put('tide', -29, 0.7)
  await put('barometer', -170, 100_900)
  expect(await tideLevelAt(parts, stationId, noon)).toBe(0.7)
  expect(await tideLevelAt(parts, stationId, noon + 2 * minute)).toBeNull()
  expect(await airPressureAt(parts, stationId, noon)).toBe(100_900)
  expect(await airPressureAt(parts, stationId, noon + 11 * minute)).toBeNull()
})

test('of another station nothing is taken', async () => {
  await put('waterLevel', 0, 3)
  const { station } = await makeStation(parts.clock)
  expect(await tideLevelAt(parts, station.id, noon)).toBeNull()
})

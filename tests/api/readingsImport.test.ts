import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { Audit, DirtyWindow, Import, ReadingBlock, Watermark } from '../../server/models/index.ts'
import { importReadings, undoImport } from '../../server/services/imports.ts'
import type { ImportOrder, ImportRow } from '../../server/services/imports.ts'
import { createReadingStore, durableUntil, readWindow } from '../../server/services/readings.ts'
import type { ReadingStore } from '../../server/services/readings.ts'
import { makeStation } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { feederOf } from '../support/storedFrames.ts'
import { readingAt } from '../support/telemetry.ts'

const six = new Date('2026-12-01T06:00:00Z')
const at = (seconds: number): Date => new Date(six.getTime() + seconds * 1000)
const ms = (seconds: number): number => at(seconds).getTime()

let parts: TestParts
let store: ReadingStore
let made: StationMade

beforeAll(async () => {
  parts = await testParts()
  store = await createReadingStore(parts)
})
afterAll(() => store.stop())
beforeEach(async () => {
  parts.clock.set(at(3600))
  made = await makeStation(parts.clock)
})

/** Rows at 4 Hz from one second up to another. */
function rowsOf(
  from: number,
  to: number,
  change: (row: ImportRow, n: number) => ImportRow = (row) => row,
): ImportRow[] {
  return Array.from({ length: (to - from) * 4 }, (_, n) => {
    const timeMs = ms(from + n / 4)
    return change({ timeMs, values: [0, 1, 2].map((sensor) => readingAt(sensor, timeMs)) }, n)
  })
}
const letters = () => made.sensors.map(({ letter }) => letter)
const take = (rows: ImportOrder['rows'], more: Partial<ImportOrder> = {}) =>
  importReadings(parts, { stationId: made.station.id, source: 'import', rows, letters: letters(), fileName: 'logger.csv', personId: null, ...more }) // prettier-ignore
const read = (from: number, to: number) => readWindow(made.station.id, ms(from), ms(to))
const blockCount = () => ReadingBlock.count({ where: { stationId: made.station.id } })
const dirtyEnds = async () =>
  (await DirtyWindow.findAll({ where: { stationId: made.station.id }, order: ['windowEndsAt'] })).map(
    ({ windowEndsAt, cause }) => [(windowEndsAt.getTime() - six.getTime()) / 60_000, cause],
  )
const computedUpTo = (end: number) =>
  Watermark.create({ job: 'computeEstimates', subjectKind: 'station', subjectId: made.station.id, doneUpTo: at(end), epoch: 1, updatedAt: at(end) }) // prettier-ignore

describe('a file of readings', () => {
  it('is stored minute by minute and read back as it was', async () => {
    const outcome = await take(rowsOf(0, 150))
    expect(outcome).toMatchObject({
      status: 'done',
      counts: { rows: 600, minutes: 3, stored: 1800, repeated: 0, conflicting: 0 },
    })
    const window = await read(0, 150)
    expect(window).toMatchObject({ sources: ['import'], clockOffsetSeconds: null, sampleCount: 1800 })
    window.series.forEach((series, sensor) => {
      expect([...series]).toEqual(Array.from({ length: 600 }, (_, n) => readingAt(sensor, ms(n / 4))))
    })
    expect(durableUntil(made.station.id)).toBe(ms(150))
    expect(await Import.findByPk(outcome.importId)).toMatchObject({ status: 'done', fileName: 'logger.csv', counts: outcome.counts }) // prettier-ignore
    expect(
      await Audit.findOne({ where: { action: 'import.store', entityId: String(outcome.importId) } }),
    ).not.toBeNull()
  })

  it('is taken from a stream too, with its sensors in any order and its gaps left open', async () => {
    async function* streamed() {
      for (const row of [...rowsOf(0, 30), ...rowsOf(40, 60)]) yield { ...row, values: row.values.toReversed() }
    }
    await take(streamed(), { letters: letters().toReversed() })
    const window = await readWindow(made.station.id, ms(0), ms(60), { letters: letters() })
    expect(window.sampleCount).toBe(600)
    expect(window.series[0]?.[160]).toBe(readingAt(0, ms(40)))
    expect(window.series[0]?.[120]).toBeNaN()
  })

  it('taken twice adds nothing the second time', async () => {
    await take(rowsOf(0, 90))
    const second = await take(rowsOf(0, 90))
    expect(second).toMatchObject({ status: 'done', counts: { minutes: 0, stored: 0, repeated: 1080, conflicting: 0 } })
    expect(await blockCount()).toBe(2)
  })

  it('fills gaps of what was streamed, and where both have a reading the streamed one stays', async () => {
    const feeder = await feederOf(parts, store, made)
    await feeder.feed(
      [10, 11, 12].map((second, n) => ({ seq: n + 1, start: at(second), shift: second === 11 ? 1 : 0 })),
    )
    const outcome = await take(rowsOf(0, 60))
    expect(outcome.counts).toMatchObject({ stored: 57 * 12, repeated: 24, conflicting: 12 })
    const [series] = (await read(0, 60)).series
    expect(series?.[44]).toBeCloseTo(readingAt(0, ms(11)) + 1, 9)
    expect(series?.[0]).toBe(readingAt(0, ms(0)))
  })

  it('marks the windows that were computed without it', async () => {
    await computedUpTo(1800)
    await take(rowsOf(60, 120))
    expect(await dirtyEnds()).toEqual(Array.from({ length: 20 }, (_, n) => [2 + n, 'import']))
  })

  it('of a demonstration is left to the watermark where nothing was computed yet', async () => {
    const outcome = await take(rowsOf(0, 60), { source: 'demonstration' })
    expect(outcome.status).toBe('done')
    expect(await read(0, 60)).toMatchObject({ sources: ['demonstration'] })
    expect(await dirtyEnds()).toEqual([])
  })

  it('is undone by taking its parts out and having their windows computed anew', async () => {
    await take(rowsOf(0, 60))
    await computedUpTo(3000)
    const { importId } = await take(rowsOf(60, 120))
    await DirtyWindow.destroy({ where: { stationId: made.station.id } })
    await undoImport(parts, importId, null)
    expect((await read(0, 120)).sampleCount).toBe(720)
    expect(await dirtyEnds()).toEqual(Array.from({ length: 20 }, (_, n) => [2 + n, 'undo']))
    expect(await Import.findByPk(importId)).toMatchObject({ status: 'undone', undoneAt: at(3600) })
    await expect(undoImport(parts, importId, null)).rejects.toMatchObject({ refusal: { code: 'import.notDone' } })
  })
})

describe('a spoilt file', () => {
  const spoil = (place: number, change: (row: ImportRow) => ImportRow) =>
    rowsOf(0, 60, (row, n) => (n === place ? change(row) : row))

  it.each<[string, () => ImportRow[], string, number | null]>([
    ['without rows', () => [], 'there are no rows', null],
    [
      'with a time that cannot be read',
      () => spoil(9, (row) => ({ ...row, timeMs: NaN })),
      'the time cannot be read',
      10,
    ],
    ['with a time that goes back', () => spoil(9, (row) => ({ ...row, timeMs: ms(-5) })), 'the time is before that of the row above', 10], // prettier-ignore
    ['with two rows in one interval', () => spoil(9, (row) => ({ ...row, timeMs: row.timeMs - 240 })), 'two rows lie in one sampling interval', 10], // prettier-ignore
    ['with a value too many', () => spoil(9, (row) => ({ ...row, values: [...row.values, 1] })), 'there are 4 values for 3 sensors', 10], // prettier-ignore
    [
      'with a value out of range',
      () => spoil(9, (row) => ({ ...row, values: [1, 1e9, 1] })),
      'a value is out of range',
      10,
    ],
    [
      'with an infinite value',
      () => spoil(9, (row) => ({ ...row, values: [1, Infinity, 1] })),
      'a value is out of range',
      10,
    ],
    ['of another rate', () => rowsOf(0, 60).filter((_, n) => n % 4 === 0), 'most rows do not follow each other at 4 Hz, the rate of the station', null], // prettier-ignore
    ['from the future', () => rowsOf(3600, 3660), 'readings lie in the future', 1],
    ['from before the station was there', () => rowsOf(-3e8, -3e8 + 60), 'the station was not yet deployed', 1],
  ])('%s changes nothing and says what is wrong', async (_, rows, reason, row) => {
    parts.clock.set(at(3500))
    const outcome = await take(rows())
    expect(outcome).toMatchObject({ status: 'failed', faults: [{ row, reason }] })
    expect(await blockCount()).toBe(0)
    expect(await Import.findByPk(outcome.importId)).toMatchObject({ status: 'failed', faults: outcome.faults })
  })

  it('that names a sensor which is not deployed changes nothing', async () => {
    const outcome = await take(rowsOf(0, 60), { letters: ['X-1', ...letters().slice(1)] })
    expect(outcome).toMatchObject({ status: 'failed', faults: [{ row: 1, reason: 'sensor X-1 was not deployed' }] })
    expect(await blockCount()).toBe(0)
  })

  it('whose stream breaks off changes nothing', async () => {
    async function* broken() {
      yield* rowsOf(0, 90)
      throw new Error('the upload was cut off')
    }
    await expect(take(broken())).rejects.toThrow('the upload was cut off')
    expect(await blockCount()).toBe(0)
  })
})

describe('a station that streams while a file of it is stored', () => {
  it('is not acknowledged in between, and what it sent is committed afterwards', async () => {
    const feeder = await feederOf(parts, store, made)
    const importing = take(rowsOf(0, 1200))
    const streamed = feeder.feed(Array.from({ length: 60 }, (_, n) => ({ seq: n + 1, start: at(1200 + n) })))
    await Promise.all([importing, streamed])
    expect((await read(0, 1260)).sampleCount).toBe(1260 * 12)
    const rows = await ReadingBlock.findAll({ where: { stationId: made.station.id } })
    expect(new Set(rows.map(({ firstCommitId }) => Number(firstCommitId))).size).toBe(1)
  })
})

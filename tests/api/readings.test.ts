import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { DirtyWindow, Frame, ReadingBlock, StationHealthHour, Watermark } from '../../server/models/index.ts'
import { execute } from '../../server/models/sql.ts'
import {
  compactReadings,
  createReadingStore,
  durableUntil,
  readWindow,
  recentTraces,
} from '../../server/services/readings.ts'
import type { ReadingStore, StoredWindow } from '../../server/services/readings.ts'
import { makeStation } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { seeded, shuffled } from '../support/seeded.ts'
import { feederOf } from '../support/storedFrames.ts'
import type { Feeder } from '../support/storedFrames.ts'
import { readingAt } from '../support/telemetry.ts'

const six = new Date('2026-12-01T06:00:00Z')
const at = (seconds: number): Date => new Date(six.getTime() + seconds * 1000)
const ms = (seconds: number): number => at(seconds).getTime()

let parts: TestParts
let store: ReadingStore
let made: StationMade
let feeder: Feeder

beforeAll(async () => {
  parts = await testParts()
  parts.clock.set(at(3600))
  store = await createReadingStore(parts)
})
afterAll(() => store.stop())
beforeEach(async () => {
  await Frame.destroy({ where: {} })
  parts.clock.set(at(3600))
  made = await makeStation(parts.clock)
  feeder = await feederOf(parts, store, made)
})

const secondsOf = (from: number, to: number, seqFrom = from + 1) =>
  Array.from({ length: to - from }, (_, n) => ({ seq: seqFrom + n, start: at(from + n) }))
const read = (from: number, to: number, upToCommitId?: number) =>
  readWindow(made.station.id, ms(from), ms(to), { upToCommitId })
const compact = (before: number, settledCommitId = Number.MAX_SAFE_INTEGER) =>
  compactReadings({ before: ms(before), settledCommitId })
const blocks = () => ReadingBlock.findAll({ where: { stationId: made.station.id }, order: ['startsAt', 'part'] })
const figuresOf = ({ startMs, letters, series, sampleCount }: StoredWindow) => ({
  startMs,
  letters,
  series,
  sampleCount,
})

/** An estimate that saw a window of twenty minutes as it stood at a commit. */
const noteEstimate = (windowEndsAt: number, inputCommitId: number | null) =>
  execute(
    parts.sequelize,
    `INSERT INTO estimates (stationId, windowEndsAt, runId, revision, windowStartsAt, computedAt, origin, deploymentId,
       settingsId, softwareVersion, inputCommitId, resultDigest, completeness, resolved, qualityFlag, waterDepth,
       sensorsUsed, sensorsDeployed)
     VALUES (:stationId, :end, 0, 1, :start, :end, 'live', :deploymentId, :settingsId, '1', :inputCommitId, '', 1, 0, 1, 12, 3, 3)`,
    {
      stationId: made.station.id,
      end: at(windowEndsAt),
      start: at(windowEndsAt - 1200),
      deploymentId: made.deployment.id,
      settingsId: made.settings.id,
      inputCommitId,
    },
  )
const computedUpTo = (end: number) =>
  Watermark.create({ job: 'computeEstimates', subjectKind: 'station', subjectId: made.station.id, doneUpTo: at(end), epoch: 1, updatedAt: at(end) }) // prettier-ignore
const dirtyEnds = async () =>
  (await DirtyWindow.findAll({ where: { stationId: made.station.id }, order: ['windowEndsAt'] })).map(
    ({ windowEndsAt }) => (windowEndsAt.getTime() - six.getTime()) / 60_000,
  )

describe('stored readings', () => {
  it('come back as they were sent, with what is missing shown as missing', async () => {
    await feeder.feed([...secondsOf(0, 20), ...secondsOf(30, 40)])
    const window = await read(-5, 45)
    expect(window.startMs).toBe(ms(-5))
    expect(window.sampleCount).toBe(30 * 4 * 3)
    window.series.forEach((series, sensor) => {
      const expected = Array.from({ length: 200 }, (_, n) => {
        const second = -5 + n / 4
        return (second >= 0 && second < 20) || (second >= 30 && second < 40) ? readingAt(sensor, ms(second)) : NaN
      })
      expect([...series]).toEqual(expected)
    })
  })

  it('off the grid go to the nearest slots, all sensors together', async () => {
    await feeder.feed([{ seq: 1, start: new Date(ms(0) + 110) }])
    const window = await read(0, 1)
    expect([...(window.series[0] ?? [])]).toEqual([0, 1, 2, 3].map((n) => readingAt(0, ms(0) + 110 + n * 250)))
  })

  it('of nothing are a window without samples, not a calm one', async () => {
    expect(await readWindow(made.station.id, ms(0), ms(60), { letters: ['A'], sampleRate: 2 })).toMatchObject({
      sampleCount: 0,
      newestCommitId: null,
      sources: [],
      series: [new Float64Array(120).fill(NaN)],
    })
  })

  it('reach as far as the newest durable sample, and give the newest traces', async () => {
    await feeder.feed(secondsOf(0, 30))
    expect(durableUntil(made.station.id)).toBe(ms(30))
    const traces = await recentTraces(made.station.id, 10)
    expect(traces).toMatchObject({ startsAt: at(20).toISOString(), interval: 0.25 })
    expect(traces?.values[1]?.[0]).toBe(readingAt(1, ms(20)))
  })

  it('in any order and partly twice are the same as in order', async () => {
    const random = seeded(99)
    const frames = secondsOf(0, 150)
    const twice = frames.filter(() => random() < 0.3)
    for (let rest = shuffled([...frames, ...twice], random); rest.length > 0; rest = rest.slice(37)) {
      await feeder.feed(rest.slice(0, 37))
    }
    const window = await read(0, 150)
    window.series.forEach((series, sensor) => {
      expect([...series]).toEqual(Array.from({ length: 600 }, (_, n) => readingAt(sensor, ms(n / 4))))
    })
    expect(feeder.stream.ledger).toEqual({ contiguous: 150, beyond: [] })
  })
})

describe('compaction', () => {
  it('moves frames into a row a minute and changes nothing that is read', async () => {
    await feeder.feed(secondsOf(0, 150))
    const before = await read(-10, 160)
    expect(await compact(120)).toBe(120)
    expect(figuresOf(await read(-10, 160))).toEqual(figuresOf(before))
    expect(await Frame.count({ where: { stationId: made.station.id } })).toBe(30)
    expect(await blocks()).toMatchObject([
      { startsAt: at(0), part: 0, source: 'live', sampleCount: 720, missingCount: 0, deploymentId: made.deployment.id },
      { startsAt: at(60), part: 0, source: 'live', sampleCount: 720, missingCount: 0 },
    ])
  })

  it('cuts a frame that lies across the last minute, and the rest follows it later', async () => {
    await feeder.feed([{ seq: 1, start: at(30), seconds: 60 }])
    const before = await read(0, 120)
    await compact(60)
    expect(figuresOf(await read(0, 120))).toEqual(figuresOf(before))
    expect(await Frame.findAll({ where: { stationId: made.station.id } })).toMatchObject([{ startsAt: at(60), sampleCount: 120 }]) // prettier-ignore
    await compact(120)
    expect(figuresOf(await read(0, 120))).toEqual(figuresOf(before))
    expect(await Frame.count({ where: { stationId: made.station.id } })).toBe(0)
    expect(await blocks()).toMatchObject([{ startsAt: at(0) }, { startsAt: at(60) }])
  })

  it('makes what came after a minute was used a part of its own, so that the estimate finds what it saw', async () => {
    await feeder.feed([...secondsOf(0, 40), ...secondsOf(50, 60)])
    const seen = await read(0, 60)
    await noteEstimate(60, seen.newestCommitId)
    await feeder.feed(secondsOf(40, 50))
    const whole = await read(0, 60)
    await compact(60)
    expect(await blocks()).toMatchObject([
      { part: 0, source: 'live', sampleCount: 600, missingCount: 120 },
      { part: 1, source: 'late', sampleCount: 120 },
    ])
    expect(figuresOf(await read(0, 60, seen.newestCommitId ?? 0))).toEqual(figuresOf(seen))
    expect(figuresOf(await read(0, 60))).toEqual(figuresOf(whole))
  })

  it('adds a part to a minute that was compacted before', async () => {
    await feeder.feed(secondsOf(0, 40))
    await compact(60)
    const seen = await read(0, 60)
    await feeder.feed(secondsOf(40, 60))
    await compact(60)
    expect(await blocks()).toMatchObject([{ part: 0 }, { part: 1 }])
    expect((await read(0, 60)).sampleCount).toBe(720)
    expect(figuresOf(await read(0, 60, seen.newestCommitId ?? 0))).toEqual(figuresOf(seen))
  })

  it('leaves alone what was committed so lately that a computation may have seen a part of it', async () => {
    await feeder.feed(secondsOf(0, 30))
    const settled = (await read(0, 60)).newestCommitId ?? 0
    await feeder.feed(secondsOf(30, 60))
    expect(await compact(60, settled)).toBe(30)
    expect(await Frame.count({ where: { stationId: made.station.id } })).toBe(30)
  })

  it('leaves repeated and conflicting frames recognisable', async () => {
    await feeder.feed(secondsOf(0, 60))
    await compact(60)
    expect(await feeder.feed([{ seq: 5, start: at(4) }])).toEqual(['repeated'])
    expect(await feeder.feed([{ seq: 6, start: at(5), shift: 0.1 }])).toEqual(['conflict'])
    const other = await feederOf(parts, store, made)
    expect(await other.feed(secondsOf(57, 63, 1))).toEqual([
      'repeated',
      'repeated',
      'repeated',
      'stored',
      'stored',
      'stored',
    ])
    expect((await read(0, 100)).sampleCount).toBe(63 * 12)
  })
})

describe('late readings', () => {
  it('mark the windows that were computed without them, in the same commit', async () => {
    parts.clock.set(at(1860))
    await feeder.feed([...secondsOf(0, 600), ...secondsOf(660, 1860, 661)])
    await computedUpTo(1860)
    await feeder.feed(secondsOf(600, 660))
    expect(await dirtyEnds()).toEqual(Array.from({ length: 20 }, (_, n) => 11 + n))
  })

  it('are none when they go on where the stored ones end', async () => {
    parts.clock.set(at(120))
    await feeder.feed(secondsOf(0, 120))
    await computedUpTo(120)
    parts.clock.set(at(181))
    await feeder.feed(secondsOf(120, 180))
    expect(await dirtyEnds()).toEqual([])
  })

  it('after a gap that the windows have passed over mark those windows', async () => {
    parts.clock.set(at(120))
    await feeder.feed(secondsOf(0, 120))
    await computedUpTo(600)
    parts.clock.set(at(620))
    await feeder.feed(secondsOf(120, 300))
    expect(await dirtyEnds()).toEqual([3, 4, 5, 6, 7, 8, 9, 10])
  })

  it('of a station that never was computed mark nothing', async () => {
    await feeder.feed(secondsOf(60, 120, 61))
    await feeder.feed(secondsOf(0, 60))
    expect(await dirtyEnds()).toEqual([])
  })
})

describe('counts of health', () => {
  it('say what came, late, again and in conflict, by sensor and hour', async () => {
    parts.clock.set(at(100))
    const own = await createReadingStore(parts)
    const counted = await feederOf(parts, own, made)
    await counted.feed(secondsOf(0, 60))
    await counted.feed([{ seq: 1, start: at(0) }])
    await counted.feed([{ seq: 2, start: at(1), shift: 1 }])
    await computedUpTo(60)
    await counted.feed([{ seq: 61, start: at(-10) }])
    await own.stop()
    const rows = await StationHealthHour.findAll({ where: { stationId: made.station.id }, order: ['hour', 'sensorId'] })
    expect(rows.map(({ sensorId }) => sensorId)).toEqual([...made.sensors, ...made.sensors].map(({ sensorId }) => sensorId)) // prettier-ignore
    expect(rows[0]).toMatchObject({ hour: at(-3600), expected: 14400, received: 4, late: 4 })
    expect(rows[3]).toMatchObject({ hour: at(0), expected: 14400, received: 240, repeated: 4, conflicting: 4, late: 0 })
    expect(rows[3]?.latencyP95).toBeGreaterThan(40)
  })
})

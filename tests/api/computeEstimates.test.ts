import { afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { startComputeEstimates } from '../../server/jobs/computeEstimates.ts'
import type { ComputeEstimates } from '../../server/jobs/computeEstimates.ts'
import { DirtyWindow, Estimate, LongJob, Station, StationSettings, Watermark } from '../../server/models/index.ts'
import { execute } from '../../server/models/sql.ts'
import { noteDirtyWindows } from '../../server/services/readings/dirty.ts'
import { currentEstimateOf, wholeEstimate } from '../../server/services/estimates.ts'
import { beginLinks } from '../../server/services/readings/links.ts'
import { loadStationFacts } from '../../server/services/readings/station.ts'
import { inTransaction } from '../../server/services/transaction.ts'
import { EstimationFailed, startEstimators } from '../../server/workers/estimators.ts'
import { makeStation } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { instantEstimators } from '../support/instantEstimators.ts'
import type { InstantEstimators } from '../support/instantEstimators.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { storeSea, surfaceArray } from '../support/storedSea.ts'
import { hangs } from '../support/unrulyEstimator.ts'

const noon = new Date('2026-12-01T12:00:00Z')
const at = (minutes: number, seconds = 0): Date => new Date(noon.getTime() + minutes * 60_000 + seconds * 1000)

let parts: TestParts
let made: StationMade
let estimators: InstantEstimators
let running: ComputeEstimates[] = []
beforeAll(async () => {
  parts = await testParts()
})
/** Each test has a station of its own, and those of the others are out of service. */
beforeEach(async () => {
  await Station.update({ retiredAt: noon }, { where: {} })
  await DirtyWindow.destroy({ where: {} })
  await LongJob.destroy({ where: {} })
  parts.clock.set(noon)
  beginLinks(parts.clock)
  made = await makeStation(parts.clock, surfaceArray)
  estimators = instantEstimators()
})
afterEach(async () => {
  for (const job of running) await job.stop()
  running = []
})

async function start(with_: InstantEstimators = estimators): Promise<ComputeEstimates> {
  const job = await startComputeEstimates(parts, { estimators: with_, isUnscheduled: true })
  running.push(job)
  return job
}
const rows = () =>
  Estimate.findAll({
    where: { stationId: made.station.id },
    order: ['windowEndsAt', 'revision'],
    raw: true,
  })
const ends = async () => (await rows()).map(({ windowEndsAt }) => (windowEndsAt.getTime() - noon.getTime()) / 60_000)
const watermark = async () => {
  const row = await Watermark.findOne({ where: { job: 'computeEstimates', subjectId: made.station.id } })
  return row?.doneUpTo ?? null
}
/** As the store does when readings come after their window. */
async function noteLateReadings(from: Date, to: Date): Promise<void> {
  const station = await loadStationFacts(made.station.id, noon)
  if (!station) throw new Error('no station')
  const change = { station, from: from.getTime(), to: to.getTime() }
  const readUpTo = new Map([[station.id, parts.clock.now().getTime()]])
  await inTransaction(parts.sequelize, (transaction) =>
    noteDirtyWindows([change], readUpTo, 'late', parts.clock.now().getTime(), transaction),
  )
}
const countTo = (n: number) => Array.from({ length: n }, (_, index) => index + 1)

describe('the job that computes estimates', () => {
  it('begins with the first reading of a station, and computes each window once', async () => {
    await storeSea(made, { from: at(0), to: at(5), commitId: 1 })
    parts.clock.set(at(5, 1))
    const job = await start()
    await job.wake()
    await job.wake()
    expect(await ends()).toEqual([1, 2, 3, 4, 5])
    expect(estimators.asked).toHaveLength(5)
    expect(await watermark()).toEqual(at(5))
  })

  it('keeps with each estimate what it was made of', async () => {
    await storeSea(made, { from: at(0), to: at(61), commitId: 41 })
    parts.clock.set(at(61, 1))
    await (await start()).wake()
    const row = (await rows()).at(-1)
    expect(row).toMatchObject({
      windowStartsAt: at(41),
      windowEndsAt: at(61),
      surgeStartsAt: at(1),
      computedAt: at(61, 1),
      revision: 1,
      origin: 'live',
      deploymentId: made.deployment.id,
      settingsId: made.settings.id,
      softwareVersion: expect.stringMatching(/^\d+\.\d+\.\d+/),
      inputCommitId: 41,
      resultDigest: expect.stringMatching(/^[0-9a-f]{64}$/),
      completeness: 1,
      sensorsUsed: 5,
      sensorsDeployed: 5,
      waterDepthSource: 'level',
    })
    // Four standard deviations of a swell of 1.2 m are 1.2 m, by the definition of the significant height.
    expect(row?.significantWaveHeight).toBeCloseTo(1.2, 1)
  })

  it('has news of each saved estimate after its commit', async () => {
    await storeSea(made, { from: at(0), to: at(1), commitId: 1 })
    parts.clock.set(at(1, 1))
    parts.news.length = 0
    await (await start()).wake()
    expect(parts.news).toContainEqual({
      topic: 'estimate.saved',
      news: { stationId: made.station.id, windowEndsAt: at(1).getTime(), revision: 1 },
    })
  })

  it('is woken by readings that reach the end of a window, and left asleep by others', async () => {
    await storeSea(made, { from: at(0), to: at(1), commitId: 1 })
    parts.clock.set(at(1))
    const job = await start()
    await job.wake()
    await storeSea(made, { from: at(1), to: at(2), commitId: 2 })
    parts.clock.set(at(2, 0.2))
    const stored = { stationId: made.station.id, from: at(1, 58).getTime(), late: false }
    parts.bus.publish('readings.stored', { ...stored, to: at(1, 59).getTime() })
    expect(await ends()).toEqual([1])
    parts.bus.publish('readings.stored', { ...stored, to: at(2).getTime() })
    await job.wake()
    expect(await ends()).toEqual([1, 2])
  })

  it('waits for the grace when samples are missing, then computes with what is there', async () => {
    await storeSea(made, { from: at(0), to: at(1), commitId: 1 })
    parts.clock.set(at(1))
    const job = await start()
    await job.wake()
    parts.clock.set(at(2, 9))
    await job.wake()
    expect(await ends()).toEqual([1])
    parts.clock.set(at(2, 10))
    await job.wake()
    expect(await ends()).toEqual([1, 2])
    const [, second] = await rows()
    expect(second?.completeness).toBeCloseTo(1 / 20, 6)
  })

  it('leaves a gap where a window has no sample at all, and its watermark moves on', async () => {
    await storeSea(made, { from: at(0), to: at(1), commitId: 1 })
    parts.clock.set(at(1))
    const job = await start()
    await job.wake()
    parts.clock.set(at(26))
    await job.wake()
    // Windows are 20 minutes long: the one that ends at 21 begins at 1, where the readings end.
    expect(await ends()).toEqual(countTo(20))
    expect(await watermark()).toEqual(at(25))
  })

  it('catches up after lost wakes, oldest first', async () => {
    await storeSea(made, { from: at(0), to: at(12), commitId: 1 })
    parts.clock.set(at(1))
    const job = await start()
    parts.clock.set(at(12, 0.5))
    await job.wake()
    expect(estimators.asked).toEqual(countTo(12).map((n) => at(n).getTime()))
  })

  it('after a long stop computes the newest first, then the rest as late, newest first', async () => {
    await storeSea(made, { from: at(0), to: at(1), commitId: 1 })
    parts.clock.set(at(1))
    await (await start()).wake()
    await storeSea(made, { from: at(1), to: at(40), commitId: 2 })
    parts.clock.set(at(40, 1))
    estimators.asked = []
    await (await start()).wake()
    expect(estimators.asked).toEqual([40, ...countTo(39).reverse().slice(0, 38)].map((n) => at(n).getTime()))
    const stored = await rows()
    expect(stored).toHaveLength(40)
    expect(stored.map(({ origin }) => origin)).toEqual(['live', ...Array(38).fill('late'), 'live'])
    expect(await DirtyWindow.count()).toBe(0)
  })

  it('computes a live window before the late ones that still wait', async () => {
    await storeSea(made, { from: at(0), to: at(40), commitId: 1 })
    parts.clock.set(at(40, 1))
    const job = await start()
    estimators.before = async () => {
      if (estimators.asked.length !== 10) return
      await storeSea(made, { from: at(40), to: at(41), commitId: 2 })
      parts.clock.set(at(41, 0.1))
    }
    await job.wake()
    expect(estimators.asked.indexOf(at(41).getTime())).toBe(10)
    expect(await ends()).toEqual(countTo(41))
  })

  it('shows a long row of late windows as a job with its share done', async () => {
    await storeSea(made, { from: at(0), to: at(40), commitId: 1, source: 'demonstration' })
    parts.clock.set(at(40, 1))
    estimators.before = () => parts.clock.advance(1)
    parts.news.length = 0
    await (await start()).wake()
    const shown = parts.news.filter(({ topic }) => topic === 'job.progressed').map(({ news }) => news)
    const shares = shown.map((news) => ('progress' in news ? news.progress : NaN))
    expect(shares).toEqual([...shares].sort((a, b) => a - b))
    expect(shown.at(-1)).toMatchObject({ kind: 'pastEstimates', status: 'done', progress: 1 })
    expect(new Set((await rows()).map(({ origin }) => origin))).toEqual(new Set(['import']))
  })

  it('makes a new revision marked late where readings came after their window', async () => {
    await storeSea(made, { from: at(0), to: at(3), commitId: 1 })
    parts.clock.set(at(3))
    const job = await start()
    await job.wake()
    await storeSea(made, { from: at(-1), to: at(0), commitId: 2, part: 2, source: 'late' })
    await noteLateReadings(at(-1), at(0))
    await job.wake()
    const stored = (await rows()).filter(({ windowEndsAt }) => windowEndsAt >= at(1))
    expect(stored.map(({ revision, origin, inputCommitId }) => [revision, origin, inputCommitId])).toEqual([
      [1, 'live', 1],
      [2, 'late', 2],
      [1, 'live', 1],
      [2, 'late', 2],
      [1, 'live', 1],
      [2, 'late', 2],
    ])
    expect(stored[1]?.completeness).toBeGreaterThan(stored[0]?.completeness ?? 1)
    estimators.asked = []
    await job.wake()
    expect(estimators.asked).toEqual([])
  })

  it('computes nothing anew for a note whose readings an estimate has already seen', async () => {
    await storeSea(made, { from: at(0), to: at(3), commitId: 5 })
    parts.clock.set(at(3))
    const job = await start()
    await job.wake()
    await noteLateReadings(at(0), at(1))
    estimators.asked = []
    await job.wake()
    expect(estimators.asked).toEqual([])
    expect(await DirtyWindow.count()).toBe(0)
  })

  it('keeps a window noted when readings are committed while it is computed', async () => {
    await storeSea(made, { from: at(0), to: at(1), commitId: 1 })
    parts.clock.set(at(1))
    const job = await start()
    let isFirst = true
    estimators.before = async () => {
      if (!isFirst) return
      isFirst = false
      await storeSea(made, { from: at(-1), to: at(0), commitId: 2, part: 2, source: 'late' })
    }
    await job.wake()
    expect((await rows()).map(({ revision, inputCommitId }) => [revision, inputCommitId])).toEqual([
      [1, 1],
      [2, 2],
    ])
  })

  it('writes estimate, detail and watermark together or not at all, and makes good what failed', async () => {
    await storeSea(made, { from: at(0), to: at(3), commitId: 1 })
    parts.clock.set(at(3))
    const job = await start()
    await execute(
      parts.sequelize,
      `CREATE TRIGGER failing BEFORE INSERT ON estimateDetails FOR EACH ROW
       SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'the disk is full'`,
    )
    await job.wake()
    expect(await ends()).toEqual([])
    expect(await watermark()).toEqual(at(0))
    await execute(parts.sequelize, 'DROP TRIGGER failing')
    await job.wake()
    expect(await ends()).toEqual([1, 2, 3])
    expect((await rows()).map(({ revision }) => revision)).toEqual([1, 1, 1])
  })

  it('goes on after a restart in the middle as if there had been none', async () => {
    await storeSea(made, { from: at(0), to: at(6), commitId: 1 })
    parts.clock.set(at(6))
    const first = await start()
    let stopped: Promise<void> | null = null
    estimators.before = () => {
      if (estimators.asked.length === 3) stopped = first.stop()
    }
    await first.wake()
    await stopped
    expect((await ends()).length).toBeLessThan(6)
    await (await start(instantEstimators())).wake()
    expect(await ends()).toEqual(countTo(6))
    expect((await rows()).map(({ revision }) => revision)).toEqual(Array(6).fill(1))
  })

  it('writes nothing more when a newer start has taken over', async () => {
    await storeSea(made, { from: at(0), to: at(2), commitId: 1 })
    parts.clock.set(at(2))
    const older = await start(instantEstimators())
    await older.wake()
    const newer = await start()
    await newer.wake()
    await storeSea(made, { from: at(2), to: at(3), commitId: 2 })
    parts.clock.set(at(3))
    await older.wake()
    expect(await ends()).toEqual([1, 2])
    await newer.wake()
    expect(await ends()).toEqual([1, 2, 3])
    expect(parts.log.join('')).toContain('another start of the program')
  })

  it('uses the settings and the geometry that were in force at the end of the window', async () => {
    const later = await StationSettings.create({
      stationId: made.station.id,
      validFrom: at(2),
      content: { ...made.settings.content, windowSeconds: 600 },
      reason: 'test',
    })
    await storeSea(made, { from: at(0), to: at(2), commitId: 1 })
    parts.clock.set(at(2))
    await (await start()).wake()
    expect((await rows()).map(({ settingsId, windowStartsAt }) => [settingsId, windowStartsAt])).toEqual([
      [made.settings.id, at(-19)],
      [later.id, at(-8)],
    ])
  })
})

describe('a window that cannot be computed', () => {
  const failing = () => {
    throw new EstimationFailed('deadline', 'no answer within 30 s')
  }

  it('is tried once more, and is well when that succeeds', async () => {
    await storeSea(made, { from: at(0), to: at(1), commitId: 1 })
    parts.clock.set(at(1))
    estimators.before = () => (estimators.asked.length === 1 ? failing() : undefined)
    await (await start()).wake()
    expect((await rows()).map(({ reason, resolved }) => [reason, Boolean(resolved)])).toEqual([[null, true]])
  })

  it('is marked with the reason after the second time, and the next goes on', async () => {
    await storeSea(made, { from: at(0), to: at(2), commitId: 1 })
    parts.clock.set(at(2))
    estimators.before = ({ windowEndsAt }) => (windowEndsAt === at(1).getTime() ? failing() : undefined)
    await (await start()).wake()
    const stored = await rows()
    expect(
      stored.map(({ reason, resolved, significantWaveHeight }) => [reason, resolved, significantWaveHeight]),
    ).toEqual([
      ['not-computed', 0, null],
      [null, 1, expect.closeTo(1.2, 0)],
    ])
    const whole = await wholeEstimate(parts, made.station.id, at(1), null)
    expect(whole?.detail?.tests).toEqual([
      {
        test: 'computation',
        flag: 2,
        value: null,
        limit: null,
        detail: 'The computation failed twice (deadline: no answer within 30 s)',
      },
    ])
  })

  it('is ended in its worker thread, and the windows of other stations go on', async () => {
    const hung = await makeStation(parts.clock, { ...surfaceArray, sampleRate: hangs })
    const threads = startEstimators({
      threads: 1,
      deadlineMs: 1_500,
      program: new URL('../support/unrulyEstimator.ts', import.meta.url),
    })
    await storeSea(made, { from: at(0), to: at(2), commitId: 1 })
    await storeSea(hung, { from: at(0), to: at(1), commitId: 1 })
    parts.clock.set(at(2))
    const job = await startComputeEstimates(parts, { estimators: threads, isUnscheduled: true })
    running.push(job)
    await job.wake()
    expect(await ends()).toEqual([1, 2])
    const ofHung = await Estimate.findAll({ where: { stationId: hung.station.id }, raw: true })
    expect(ofHung.map(({ reason }) => reason)).toEqual(['not-computed'])
  })
})

describe('the clock of a station', () => {
  it.each([
    [0.4, true, null],
    [-2.5, true, null],
    [12, false, 'clock'],
  ])('that is %d s off its server leaves the vector resolved: %s', async (offset, resolved, reason) => {
    await storeSea(made, { from: at(-20), to: at(1), commitId: 1, clockOffset: -offset })
    parts.clock.set(at(1))
    const threads = startEstimators({ threads: 1, deadlineMs: 30_000 })
    const job = await startComputeEstimates(parts, { estimators: threads, isUnscheduled: true })
    running.push(job)
    await job.wake()
    const row = (await rows()).at(-1)
    expect([Boolean(row?.resolved), row?.reason]).toEqual([resolved, reason])
    if (Math.abs(offset) > 1) expect(row?.qualityFlag).toBeGreaterThanOrEqual(3)
    const whole = await wholeEstimate(parts, made.station.id, at(1), null)
    expect(whole?.detail?.tests.find(({ test }) => test === 'station clock')?.value).toBeCloseTo(offset, 6)
  })
})

describe('the whole way through worker threads', () => {
  it('gives the vector of a swell whose bearing and speed are known', async () => {
    await storeSea(made, { from: at(-20), to: at(1), commitId: 1 })
    parts.clock.set(at(1))
    const threads = startEstimators({ threads: 1, deadlineMs: 30_000 })
    const job = await startComputeEstimates(parts, { estimators: threads, isUnscheduled: true })
    running.push(job)
    await job.wake()
    const current = await currentEstimateOf(parts, made.station.id)
    expect(current).toMatchObject({ resolved: true, windowEndsAt: at(1).toISOString() })
    // Bearing as laid down; speed of 10 s waves in 12 m by linear theory: 9.92 m/s (Dean and Dalrymple 1991, eq. 3.34).
    expect(current?.systems[0]?.toward).toBeCloseTo(60, -1)
    expect(current?.systems[0]?.speed).toBeCloseTo(9.9, 0)
    expect(current?.waterDepth).toBeCloseTo(12, 1)
  })
})

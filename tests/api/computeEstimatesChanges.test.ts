import { describe, expect, it } from 'vitest'
import { DirtyWindow, LongJob, ReadingBlock, StationSettings } from '../../server/models/index.ts'
import { execute } from '../../server/models/sql.ts'
import { at, countTo, estimatingStation } from '../support/estimatingStation.ts'
import { instantEstimators } from '../support/instantEstimators.ts'
import { storeSea } from '../support/storedSea.ts'

const e = estimatingStation()

describe('estimates when readings, the database or the program change under the job', () => {
  it('makes a new revision marked late where readings came after their window', async () => {
    await storeSea(e.made, { from: at(0), to: at(3), commitId: 1 })
    e.parts.clock.set(at(3))
    const job = await e.start()
    await job.wake()
    await storeSea(e.made, { from: at(-1), to: at(0), commitId: 2, part: 2, source: 'late' })
    await e.noteLateReadings(at(-1), at(0))
    await job.wake()
    const stored = (await e.rows()).filter(({ windowEndsAt }) => windowEndsAt >= at(1))
    expect(stored.map(({ revision, origin, inputCommitId }) => [revision, origin, inputCommitId])).toEqual([
      [1, 'live', 1],
      [2, 'late', 2],
      [1, 'live', 1],
      [2, 'late', 2],
      [1, 'live', 1],
      [2, 'late', 2],
    ])
    expect(stored[1]?.completeness).toBeGreaterThan(stored[0]?.completeness ?? 1)
    e.estimators.asked = []
    await job.wake()
    expect(e.estimators.asked).toEqual([])
  })

  it('waits for a buffer that is coming in, and computes each of its windows once', async () => {
    e.parts.clock.set(at(25, 30))
    const job = await e.start()
    await job.wake()
    for (let minute = 0; minute < 25; minute += 1) {
      await storeSea(e.made, { from: at(minute), to: at(minute + 1), commitId: minute + 1 })
      if ((await e.watermark()) !== null) await e.noteLateReadings(at(minute), at(minute + 1))
      const stored = { stationId: e.made.station.id, from: at(minute).getTime(), to: at(minute + 1).getTime() }
      e.parts.bus.publish('readings.stored', { ...stored, late: true })
      await job.wake()
    }
    expect(await e.ends()).toEqual(countTo(25))
    expect(new Set((await e.rows()).map(({ revision }) => revision))).toEqual(new Set([1]))
    expect(await DirtyWindow.count()).toBe(0)
    expect(await LongJob.count()).toBe(0)
  })

  it('computes nothing anew for a note whose readings an estimate has already seen', async () => {
    await storeSea(e.made, { from: at(0), to: at(3), commitId: 5 })
    e.parts.clock.set(at(3))
    const job = await e.start()
    await job.wake()
    await e.noteLateReadings(at(0), at(1))
    e.estimators.asked = []
    await job.wake()
    expect(e.estimators.asked).toEqual([])
    expect(await DirtyWindow.count()).toBe(0)
  })

  it('withdraws an estimate whose readings were taken out again', async () => {
    await storeSea(e.made, { from: at(0), to: at(1), commitId: 5, source: 'import' })
    e.parts.clock.set(at(1))
    const job = await e.start()
    await job.wake()
    await ReadingBlock.destroy({ where: { stationId: e.made.station.id } })
    const undone = { stationId: e.made.station.id, windowEndsAt: at(1), cause: 'undo' as const, notedAt: at(1) }
    await DirtyWindow.create(undone)
    await job.wake()
    expect((await e.rows()).map((row) => [row.revision, row.origin, row.reason, row.completeness])).toEqual([
      [1, 'import', null, expect.any(Number)],
      [2, 'recompute', 'too-little-data', 0],
    ])
  })

  it('keeps a window noted when readings are committed while it is computed', async () => {
    await storeSea(e.made, { from: at(0), to: at(1), commitId: 1 })
    e.parts.clock.set(at(1))
    const job = await e.start()
    let isFirst = true
    e.estimators.before = async () => {
      if (!isFirst) return
      isFirst = false
      await storeSea(e.made, { from: at(-1), to: at(0), commitId: 2, part: 2, source: 'late' })
    }
    await job.wake()
    expect((await e.rows()).map(({ revision, inputCommitId }) => [revision, inputCommitId])).toEqual([
      [1, 1],
      [2, 2],
    ])
  })

  it('writes estimate, detail and watermark together or not at all, and makes good what failed', async () => {
    await storeSea(e.made, { from: at(0), to: at(3), commitId: 1 })
    e.parts.clock.set(at(3))
    const job = await e.start()
    await execute(
      e.parts.sequelize,
      `CREATE TRIGGER failing BEFORE INSERT ON estimateDetails FOR EACH ROW
       SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'the disk is full'`,
    )
    await job.wake()
    expect(await e.ends()).toEqual([])
    expect(await e.watermark()).toEqual(at(0))
    await execute(e.parts.sequelize, 'DROP TRIGGER failing')
    await job.wake()
    expect(await e.ends()).toEqual([1, 2, 3])
    expect((await e.rows()).map(({ revision }) => revision)).toEqual([1, 1, 1])
  })

  it('goes on after a restart in the middle as if there had been none', async () => {
    await storeSea(e.made, { from: at(0), to: at(6), commitId: 1 })
    e.parts.clock.set(at(6))
    const first = await e.start()
    let stopped: Promise<void> | null = null
    e.estimators.before = () => {
      if (e.estimators.asked.length === 3) stopped = first.stop()
    }
    await first.wake()
    await stopped
    expect((await e.ends()).length).toBeLessThan(6)
    await (await e.start(instantEstimators())).wake()
    expect(await e.ends()).toEqual(countTo(6))
    expect((await e.rows()).map(({ revision }) => revision)).toEqual(Array(6).fill(1))
  })

  it('writes nothing more when a newer start has taken over', async () => {
    await storeSea(e.made, { from: at(0), to: at(2), commitId: 1 })
    e.parts.clock.set(at(2))
    const older = await e.start(instantEstimators())
    await older.wake()
    const newer = await e.start()
    await newer.wake()
    await storeSea(e.made, { from: at(2), to: at(3), commitId: 2 })
    e.parts.clock.set(at(3))
    await older.wake()
    expect(await e.ends()).toEqual([1, 2])
    await newer.wake()
    expect(await e.ends()).toEqual([1, 2, 3])
    expect(e.parts.log.join('')).toContain('another start of the program')
  })

  it('uses the settings and the geometry that were in force at the end of the window', async () => {
    const later = await StationSettings.create({
      stationId: e.made.station.id,
      validFrom: at(2),
      content: { ...e.made.settings.content, windowSeconds: 600 },
      reason: 'test',
    })
    await storeSea(e.made, { from: at(0), to: at(2), commitId: 1 })
    e.parts.clock.set(at(2))
    await (await e.start()).wake()
    expect((await e.rows()).map(({ settingsId, windowStartsAt }) => [settingsId, windowStartsAt])).toEqual([
      [e.made.settings.id, at(-19)],
      [later.id, at(-8)],
    ])
  })
})

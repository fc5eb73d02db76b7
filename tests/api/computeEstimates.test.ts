import { describe, expect, it } from 'vitest'
import { DirtyWindow } from '../../server/models/index.ts'
import { at, countTo, estimatingStation } from '../support/estimatingStation.ts'
import { storeSea } from '../support/storedSea.ts'

const e = estimatingStation()

describe('the job that computes estimates', () => {
  it('begins with the first reading of a station, and computes each window once', async () => {
    await storeSea(e.made, { from: at(0), to: at(5), commitId: 1 })
    e.parts.clock.set(at(5, 1))
    const job = await e.start()
    await job.wake()
    await job.wake()
    expect(await e.ends()).toEqual([1, 2, 3, 4, 5])
    expect(e.estimators.asked).toHaveLength(5)
    expect(await e.watermark()).toEqual(at(5))
  })

  it('keeps with each estimate what it was made of', async () => {
    await e.setWatermark(at(60))
    await storeSea(e.made, { from: at(0), to: at(61), commitId: 41 })
    e.parts.clock.set(at(61, 1))
    await (await e.start()).wake()
    const row = (await e.rows()).at(-1)
    expect(row).toMatchObject({
      windowStartsAt: at(41),
      windowEndsAt: at(61),
      surgeStartsAt: at(1),
      computedAt: at(61, 1),
      revision: 1,
      origin: 'live',
      deploymentId: e.made.deployment.id,
      settingsId: e.made.settings.id,
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
    await storeSea(e.made, { from: at(0), to: at(1), commitId: 1 })
    e.parts.clock.set(at(1, 1))
    e.parts.news.length = 0
    await (await e.start()).wake()
    expect(e.parts.news).toContainEqual({
      topic: 'estimate.saved',
      news: { stationId: e.made.station.id, windowEndsAt: at(1).getTime(), revision: 1 },
    })
  })

  it('is woken by readings that reach the end of a window, and left asleep by others', async () => {
    await storeSea(e.made, { from: at(0), to: at(1), commitId: 1 })
    e.parts.clock.set(at(1))
    const job = await e.start()
    await job.wake()
    await storeSea(e.made, { from: at(1), to: at(2), commitId: 2 })
    e.parts.clock.set(at(2, 0.2))
    const stored = { stationId: e.made.station.id, from: at(1, 58).getTime(), late: false }
    e.parts.bus.publish('readings.stored', { ...stored, to: at(1, 59).getTime() })
    expect(await e.ends()).toEqual([1])
    e.parts.bus.publish('readings.stored', { ...stored, to: at(2).getTime() })
    await job.wake()
    expect(await e.ends()).toEqual([1, 2])
  })

  it('waits for the grace when samples are missing, then computes with what is there', async () => {
    await storeSea(e.made, { from: at(0), to: at(1), commitId: 1 })
    e.parts.clock.set(at(1))
    const job = await e.start()
    await job.wake()
    e.parts.clock.set(at(2, 9))
    await job.wake()
    expect(await e.ends()).toEqual([1])
    e.parts.clock.set(at(2, 10))
    await job.wake()
    expect(await e.ends()).toEqual([1, 2])
    const [, second] = await e.rows()
    expect(second?.completeness).toBeCloseTo(1 / 20, 6)
  })

  it('leaves a gap where a window has no sample at all, and its watermark moves on', async () => {
    await storeSea(e.made, { from: at(0), to: at(1), commitId: 1 })
    e.parts.clock.set(at(1))
    const job = await e.start()
    await job.wake()
    e.parts.clock.set(at(26))
    await job.wake()
    // Windows are 20 minutes long: the one that ends at 21 begins at 1, where the readings end.
    expect(await e.ends()).toEqual(countTo(20))
    expect(await e.watermark()).toEqual(at(25))
  })

  it('catches up after lost wakes, oldest first', async () => {
    await storeSea(e.made, { from: at(0), to: at(12), commitId: 1 })
    e.parts.clock.set(at(1))
    const job = await e.start()
    e.parts.clock.set(at(12, 0.5))
    await job.wake()
    expect(e.estimators.asked).toEqual(countTo(12).map((n) => at(n).getTime()))
  })

  it('after a long stop computes the newest first, then the rest as late, newest first', async () => {
    await storeSea(e.made, { from: at(0), to: at(1), commitId: 1 })
    e.parts.clock.set(at(1))
    await (await e.start()).wake()
    await storeSea(e.made, { from: at(1), to: at(40), commitId: 2 })
    e.parts.clock.set(at(40, 1))
    e.estimators.asked = []
    await (await e.start()).wake()
    expect(e.estimators.asked).toEqual([40, ...countTo(39).reverse().slice(0, 38)].map((n) => at(n).getTime()))
    const stored = await e.rows()
    expect(stored).toHaveLength(40)
    expect(stored.map(({ origin }) => origin)).toEqual(['live', ...Array(38).fill('late'), 'live'])
    expect(await DirtyWindow.count()).toBe(0)
  })

  it('computes a live window before the late ones that still wait', async () => {
    await storeSea(e.made, { from: at(0), to: at(40), commitId: 1 })
    e.parts.clock.set(at(40, 1))
    const job = await e.start()
    e.estimators.before = async () => {
      if (e.estimators.asked.length !== 10) return
      await storeSea(e.made, { from: at(40), to: at(41), commitId: 2 })
      e.parts.clock.set(at(41, 0.1))
    }
    await job.wake()
    expect(e.estimators.asked.indexOf(at(41).getTime())).toBe(10)
    expect(await e.ends()).toEqual(countTo(41))
  })

  it('shows a long row of late windows as a job with its share done', async () => {
    await storeSea(e.made, { from: at(0), to: at(40), commitId: 1, source: 'demonstration' })
    e.parts.clock.set(at(40, 1))
    e.estimators.before = () => e.parts.clock.advance(1)
    e.parts.news.length = 0
    await (await e.start()).wake()
    const shown = e.parts.news.filter(({ topic }) => topic === 'job.progressed').map(({ news }) => news)
    const shares = shown.map((news) => ('progress' in news ? news.progress : NaN))
    expect(shares).toEqual([...shares].sort((a, b) => a - b))
    expect(shown.at(-1)).toMatchObject({ kind: 'pastEstimates', status: 'done', progress: 1 })
    expect(new Set((await e.rows()).map(({ origin }) => origin))).toEqual(new Set(['import']))
  })
})

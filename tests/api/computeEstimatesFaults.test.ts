import { describe, expect, it } from 'vitest'
import { Estimate } from '../../server/models/index.ts'
import { currentEstimateOf, wholeEstimate } from '../../server/services/estimates.ts'
import { EstimationFailed, startEstimators } from '../../server/workers/estimators.ts'
import { at, estimatingStation } from '../support/estimatingStation.ts'
import { makeStation } from '../support/factories.ts'
import { storeSea, surfaceArray } from '../support/storedSea.ts'
import { hangs } from '../support/unrulyEstimator.ts'

const e = estimatingStation()

describe('a window that cannot be computed', () => {
  const failing = () => {
    throw new EstimationFailed('deadline', 'no answer within 30 s')
  }

  it('is tried once more, and is well when that succeeds', async () => {
    await storeSea(e.made, { from: at(0), to: at(1), commitId: 1 })
    e.parts.clock.set(at(1))
    e.estimators.before = () => (e.estimators.asked.length === 1 ? failing() : undefined)
    await (await e.start()).wake()
    expect((await e.rows()).map(({ reason, resolved }) => [reason, Boolean(resolved)])).toEqual([[null, true]])
  })

  it('is marked with the reason after the second time, and the next goes on', async () => {
    await storeSea(e.made, { from: at(0), to: at(2), commitId: 1 })
    e.parts.clock.set(at(2))
    e.estimators.before = ({ windowEndsAt }) => (windowEndsAt === at(1).getTime() ? failing() : undefined)
    await (await e.start()).wake()
    const stored = await e.rows()
    expect(
      stored.map(({ reason, resolved, significantWaveHeight }) => [reason, resolved, significantWaveHeight]),
    ).toEqual([
      ['not-computed', 0, null],
      [null, 1, expect.closeTo(1.2, 0)],
    ])
    const whole = await wholeEstimate(e.parts, e.made.station.id, at(1), null)
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
    const hung = await makeStation(e.parts.clock, { ...surfaceArray, sampleRate: hangs })
    const threads = startEstimators({
      threads: 1,
      deadlineMs: 1_500,
      program: new URL('../support/unrulyEstimator.ts', import.meta.url),
    })
    await storeSea(e.made, { from: at(0), to: at(2), commitId: 1 })
    await storeSea(hung, { from: at(0), to: at(1), commitId: 1 })
    e.parts.clock.set(at(2))
    const job = await e.start(threads)
    await job.wake()
    expect(await e.ends()).toEqual([1, 2])
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
    await e.setWatermark(at(0))
    await storeSea(e.made, { from: at(-20), to: at(1), commitId: 1, clockOffset: -offset })
    e.parts.clock.set(at(1))
    const job = await e.startThreads()
    await job.wake()
    const row = (await e.rows()).at(-1)
    expect([Boolean(row?.resolved), row?.reason]).toEqual([resolved, reason])
    if (Math.abs(offset) > 1) expect(row?.qualityFlag).toBeGreaterThanOrEqual(3)
    const whole = await wholeEstimate(e.parts, e.made.station.id, at(1), null)
    expect(whole?.detail?.tests.find(({ test }) => test === 'station clock')?.value).toBeCloseTo(offset, 6)
  })
})

describe('the whole way through worker threads', () => {
  it('gives the vector of a swell whose bearing and speed are known', async () => {
    await e.setWatermark(at(0))
    await storeSea(e.made, { from: at(-20), to: at(1), commitId: 1 })
    e.parts.clock.set(at(1))
    const job = await e.startThreads()
    await job.wake()
    const current = await currentEstimateOf(e.parts, e.made.station.id)
    expect(current).toMatchObject({ resolved: true, windowEndsAt: at(1).toISOString() })
    // Bearing as laid down; speed of 10 s waves in 12 m by linear theory: 9.92 m/s (Dean and Dalrymple 1991, eq. 3.34).
    expect(current?.systems[0]?.toward).toBeCloseTo(60, -1)
    expect(current?.systems[0]?.speed).toBeCloseTo(9.9, 0)
    expect(current?.waterDepth).toBeCloseTo(12, 1)
  })
})

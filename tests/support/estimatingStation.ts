/** A station of its own for each test, with a job that computes its estimates by a clock that the test holds. */
import { afterEach, beforeAll, beforeEach } from 'vitest'
import { startComputeEstimates } from '../../server/jobs/computeEstimates.ts'
import type { ComputeEstimates } from '../../server/jobs/computeEstimates.ts'
import { DirtyWindow, Estimate, LongJob, Station, Watermark } from '../../server/models/index.ts'
import { noteDirtyWindows } from '../../server/services/readings/dirty.ts'
import { beginLinks } from '../../server/services/readings/links.ts'
import { loadStationFacts } from '../../server/services/readings/station.ts'
import { inTransaction } from '../../server/services/transaction.ts'
import { startEstimators } from '../../server/workers/estimators.ts'
import type { Estimators } from '../../server/workers/estimators.ts'
import { makeStation } from './factories.ts'
import type { StationMade } from './factories.ts'
import { instantEstimators } from './instantEstimators.ts'
import type { InstantEstimators } from './instantEstimators.ts'
import { testParts } from './parts.ts'
import type { TestParts } from './parts.ts'
import { surfaceArray } from './storedSea.ts'

const noon = new Date('2026-12-01T12:00:00Z')

/** Minutes and seconds after noon. */
export const at = (minutes: number, seconds = 0): Date => new Date(noon.getTime() + minutes * 60_000 + seconds * 1000)

export const countTo = (n: number): number[] => Array.from({ length: n }, (_, index) => index + 1)

export interface Estimating {
  parts: TestParts
  made: StationMade
  estimators: InstantEstimators
  /** Ended after the test. */
  start(estimators?: Estimators): Promise<ComputeEstimates>
  startThreads(): Promise<ComputeEstimates>
  rows(): Promise<Estimate[]>
  /** Window ends in minutes after noon. */
  ends(): Promise<number[]>
  watermark(): Promise<Date | null>
  /** As if all windows up to this end had been dealt with. */
  setWatermark(doneUpTo: Date): Promise<void>
  /** As the store does when readings come after their window. */
  noteLateReadings(from: Date, to: Date): Promise<void>
}

/** To be called at the top of a file; what it answers is renewed before each test. */
export function estimatingStation(): Estimating {
  let running: ComputeEstimates[] = []
  async function start(estimators: Estimators = held.estimators): Promise<ComputeEstimates> {
    const job = await startComputeEstimates(held.parts, { estimators, isUnscheduled: true })
    running.push(job)
    return job
  }
  const rows = () =>
    Estimate.findAll({
      where: { stationId: held.made.station.id },
      order: ['windowEndsAt', 'revision'],
      raw: true,
    })
  const methods = {
    start,
    startThreads: () => start(startEstimators({ threads: 1, deadlineMs: 30_000 })),
    rows,
    ends: async () => (await rows()).map(({ windowEndsAt }) => (windowEndsAt.getTime() - noon.getTime()) / 60_000),
    async watermark() {
      const row = await Watermark.findOne({ where: { job: 'computeEstimates', subjectId: held.made.station.id } })
      return row?.doneUpTo ?? null
    },
    async setWatermark(doneUpTo: Date) {
      const key = { job: 'computeEstimates', subjectKind: 'station', subjectId: held.made.station.id }
      await Watermark.create({ ...key, doneUpTo, updatedAt: noon })
    },
    async noteLateReadings(from: Date, to: Date) {
      const now = held.parts.clock.now().getTime()
      const station = await loadStationFacts(held.made.station.id, noon)
      if (!station) throw new Error('no station')
      const change = { station, from: from.getTime(), to: to.getTime() }
      await inTransaction(held.parts.sequelize, (transaction) =>
        noteDirtyWindows([change], new Map([[station.id, now]]), 'late', now, transaction),
      )
    },
  }
  const held = { ...methods } as Estimating

  beforeAll(async () => {
    held.parts = await testParts()
  })
  beforeEach(async () => {
    // The stations of earlier tests are out of service.
    await Station.update({ retiredAt: noon }, { where: {} })
    await DirtyWindow.destroy({ where: {} })
    await LongJob.destroy({ where: {} })
    held.parts.clock.set(noon)
    beginLinks(held.parts.clock)
    held.made = await makeStation(held.parts.clock, surfaceArray)
    held.estimators = instantEstimators()
  })
  afterEach(async () => {
    for (const job of running) await job.stop()
    running = []
  })
  return held
}

import { describe, expect, it } from 'vitest'
import { startComputeEstimates } from '../../server/jobs/computeEstimates.ts'
import { startRecompute } from '../../server/jobs/recompute.ts'
import { LongJob } from '../../server/models/index.ts'
import { listJobs } from '../../server/services/longJobs.ts'
import { orderRun } from '../../server/services/runs.ts'
import { at, estimatingStation } from '../support/estimatingStation.ts'
import { makePerson } from '../support/factories.ts'
import { instantEstimators } from '../support/instantEstimators.ts'
import { storeSea } from '../support/storedSea.ts'

const e = estimatingStation()
const fault = 'speed of 10 s in 3 m: 5.41, not 5.32 ± 0.005'

describe('a program whose self-test fails', () => {
  it('publishes no estimate, keeps the windows due, and says so in the log and on the page', async () => {
    await storeSea(e.made, { from: at(0), to: at(3), commitId: 1 })
    e.parts.clock.set(at(3))
    const estimators = instantEstimators()
    const job = await startComputeEstimates(e.parts, { estimators, isUnscheduled: true, selfTest: async () => [fault] })
    await job.wake()
    await job.stop()
    expect(estimators.asked).toEqual([])
    expect(await e.ends()).toEqual([])
    expect(e.parts.log.join('')).toContain(fault)
    const [shown] = await listJobs(e.parts)
    expect(shown).toMatchObject({ status: 'failed', title: 'Self-test of the estimator: no estimates are published' })
    expect(shown?.detail).toContain(fault)
    await (await e.start()).wake()
    expect(await e.ends()).toEqual([1, 2, 3])
  })

  it('recomputes nothing either', async () => {
    const { id } = await makePerson(e.parts.clock, { role: 'admin' })
    const span = { startsAt: at(-3).toISOString(), endsAt: at(0).toISOString(), stepSeconds: 60 }
    const order = { label: 'again', reason: 'a test', settingsId: null, deploymentId: null, changes: {}, ...span }
    await orderRun(e.parts, e.made.station.id, order, id)
    const job = startRecompute(e.parts, { isUnscheduled: true, selfTest: async () => [fault] })
    await job.wake()
    await job.stop()
    const [row] = await LongJob.findAll({ where: { kind: 'recompute' } })
    expect(row).toMatchObject({ status: 'failed', detail: expect.stringContaining('self-test') })
  })
})

import type { Express } from 'express'
import { beforeEach, describe, expect, it } from 'vitest'
import { createApp } from '../../server/app.ts'
import { digestAgain } from '../../server/commands/recompute/digestAgain.ts'
import { softwareVersion } from '../../server/config/softwareVersion.ts'
import { startRecompute } from '../../server/jobs/recompute.ts'
import { Audit, ClockOffset, Deployment, DeploymentSensor, Estimate, LongJob, Run } from '../../server/models/index.ts'
import { chanceEstimates, readTimelines } from '../../server/services/estimates.ts'
import { estimate } from '../../shared/waves/estimate.ts'
import { withoutFigures } from '../../shared/waves/stationClock.ts'
import type { ArrayWindow } from '../../shared/waves/window.ts'
import { signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { at, countTo, estimatingStation } from '../support/estimatingStation.ts'
import { makePerson, makeStation } from '../support/factories.ts'
import { instantEstimators } from '../support/instantEstimators.ts'
import type { InstantEstimators } from '../support/instantEstimators.ts'
import { storeSea } from '../support/storedSea.ts'

const gone = {
  reason: 'not-computed' as const,
  qualityFlag: 2 as const,
  waterDepthSource: 'nominal' as const,
  completeness: 0,
  sensors: [],
  tests: [],
}
const e = estimatingStation()
let app: Express
let admin: Browser
let estimators: InstantEstimators

beforeEach(async () => {
  app = createApp(e.parts)
  admin = await signedIn(app, (await makePerson(e.parts.clock, { role: 'admin' })).email)
  estimators = instantEstimators()
})

const path = () => `/api/stations/${e.made.station.id}/runs`
const order = (changes: object = {}) => ({
  label: 'Ten minutes',
  reason: 'to see shorter windows',
  startsAt: at(0).toISOString(),
  endsAt: at(6).toISOString(),
  stepSeconds: 60,
  settingsId: null,
  changes: {},
  deploymentId: null,
  ...changes,
})

/** Six minutes of readings and their operational estimates. */
async function record(): Promise<void> {
  await storeSea(e.made, { from: at(0), to: at(6), commitId: 1 })
  e.parts.clock.set(at(6))
  await (await e.start()).wake()
}
const startRuns = () => startRecompute(e.parts, { estimators: () => estimators, isUnscheduled: true })
const ofRun = (runId: number) => Estimate.findAll({ where: { runId }, order: ['windowEndsAt'], raw: true })

describe('a recomputation', () => {
  it('goes into a version of its own, and the operational record stays', async () => {
    await record()
    const before = await e.rows()
    const job = startRuns()
    const { body: run } = await admin
      .post(path())
      .send(order({ changes: { windowSeconds: 600 } }))
      .expect(201)
    await job.wake()
    const made = await ofRun(run.id)
    expect(made.map(({ windowEndsAt }) => windowEndsAt)).toEqual(countTo(6).map((n) => at(n)))
    expect(made.every(({ origin, windowStartsAt, windowEndsAt }) => origin === 'recompute' && windowEndsAt.getTime() - windowStartsAt.getTime() === 600_000)).toBe(true) // prettier-ignore
    expect((await e.rows()).filter(({ runId }) => runId === 0)).toEqual(before)
    const [shown] = (await admin.get(path()).expect(200)).body
    expect(shown).toMatchObject({ id: run.id, label: 'Ten minutes', status: 'done', progress: 1 })
    expect(shown.detail).toBe('6 windows computed, 0 without readings or made before')
    const { body } = await admin.get(`${path()}/${run.id}/comparison`).expect(200)
    expect(body).toMatchObject({ windows: 6, compared: 6, same: 0, otherVersions: [] })
    expect(body.largest.height).not.toBeNull()
    expect(await Audit.count({ where: { action: 'run.order', entityId: String(run.id) } })).toBe(1)
    await job.stop()
  })

  it('with nothing changed gives the same results, from what had been stored when each estimate was made', async () => {
    await record()
    // Readings that came later, of which no estimate was made yet.
    await storeSea(e.made, { from: at(-3), to: at(0), commitId: 2, part: 2, source: 'late' })
    const job = startRuns()
    const { body: run } = await admin.post(path()).send(order()).expect(201)
    await job.wake()
    const { body } = await admin.get(`${path()}/${run.id}/comparison`).expect(200)
    expect(body).toMatchObject({ windows: 6, compared: 6, same: 6, most: [] })
    expect(body.largest.height.height).toBe(0)
    await job.stop()
  })

  it('uses a corrected deployment, which the operational job never does', async () => {
    await record()
    const { id: _, ...survey } = e.made.deployment.get({ plain: true })
    const corrected = await Deployment.create({
      ...survey,
      recordedAt: at(5),
      replacesId: e.made.deployment.id,
      waterDepth: 9,
      levelOfBed: -9,
    })
    for (const { id: _id, ...sensor } of e.made.sensors.map((one) => one.get({ plain: true })))
      await DeploymentSensor.create({ ...sensor, deploymentId: corrected.id })
    const { body: choices } = await admin.get(`${path()}/choices`).expect(200)
    expect(choices.deployments).toContainEqual(expect.objectContaining({ id: corrected.id, replacesId: e.made.deployment.id })) // prettier-ignore
    const job = startRuns()
    const { body: run } = await admin
      .post(path())
      .send(order({ deploymentId: corrected.id }))
      .expect(201)
    await job.wake()
    expect((await ofRun(run.id)).map(({ deploymentId, waterDepth }) => [deploymentId, Math.round(waterDepth)])).toEqual(
      countTo(6).map(() => [corrected.id, 9]),
    )
    await job.stop()
  })

  it('that is cancelled keeps what it has done and says so', async () => {
    await record()
    const job = startRuns()
    estimators.before = async () => {
      e.parts.clock.advance(2)
      if (estimators.asked.length !== 2) return
      const [running] = await LongJob.findAll({ where: { kind: 'recompute' } })
      await admin.post(`/api/jobs/${running!.id}/cancel`).expect(200)
    }
    const { body: run } = await admin.post(path()).send(order()).expect(201)
    await job.wake()
    expect(await ofRun(run.id)).toHaveLength(2)
    const [shown] = (await admin.get(path()).expect(200)).body
    expect(shown.status).toBe('cancelled')
    expect((await Run.findByPk(run.id))?.status).toBe('cancelled')
    await job.stop()
  })

  it('that a stop interrupted is gone on with, each window once', async () => {
    await record()
    const first = startRuns()
    let stopped: Promise<void> | null = null
    estimators.before = () => {
      if (estimators.asked.length === 3) stopped = first.stop()
    }
    const { body: run } = await admin.post(path()).send(order()).expect(201)
    await first.wake()
    await stopped
    expect((await ofRun(run.id)).length).toBeLessThan(6)
    estimators = instantEstimators()
    e.parts.clock.advance(120)
    const second = startRuns()
    await second.wake()
    expect((await ofRun(run.id)).map(({ windowEndsAt }) => windowEndsAt)).toEqual(countTo(6).map((n) => at(n)))
    await second.stop()
  })

  it('is refused for settings or a survey of another station, the future, and more than a month', async () => {
    const other = await makeStation(e.parts.clock)
    const faultsOf = async (changes: object) =>
      (await admin.post(path()).send(order(changes)).expect(422)).body.errors.map(
        ({ path: field }: { path: string }) => field,
      )
    expect(await faultsOf({ settingsId: other.settings.id, endsAt: at(-1).toISOString(), startsAt: at(-9).toISOString() })).toEqual(['settingsId']) // prettier-ignore
    expect(await faultsOf({ deploymentId: other.deployment.id })).toEqual(['deploymentId'])
    expect(await faultsOf({ endsAt: at(60 * 24).toISOString() })).toEqual(['endsAt'])
    expect(await faultsOf({ startsAt: at(-60 * 24 * 40).toISOString() })).toEqual(['startsAt'])
    expect(await faultsOf({ reason: ' ' })).toEqual(['reason'])
    expect(await Run.count({ where: { stationId: e.made.station.id } })).toBe(0)
  })
})

describe('a stored estimate computed again', { timeout: 30_000 }, () => {
  it('has the same fingerprint, whatever came or was confirmed since; from another program it has another', async () => {
    await storeSea(e.made, { from: at(-20), to: at(1), commitId: 1 })
    e.parts.clock.set(at(1))
    await e.setWatermark(at(0))
    await (await e.startThreads()).wake()
    const [timeline] = await readTimelines(e.parts.sequelize)
    const [stored] = await chanceEstimates(e.parts, [e.made.station.id], 5, () => 0.5)
    expect(stored).toMatchObject({ softwareVersion, windowEndsAt: at(1) })

    await storeSea(e.made, { from: at(-10), to: at(0), commitId: 2, part: 2, source: 'late' })
    const confirmed = { sensorId: e.made.sensors[0]!.sensorId, offsetSeconds: 0.3, sd: 0.1, confirmedById: null }
    await ClockOffset.create({ ...confirmed, validFrom: at(-60), recordedAt: at(3), reason: 'test' })
    const [later] = await readTimelines(e.parts.sequelize)
    expect(await digestAgain(e.parts, later!, stored!, estimate)).toBe(stored!.resultDigest)

    const seen: ArrayWindow[] = []
    const other = (window: ArrayWindow) => {
      seen.push(window)
      return withoutFigures({ ...gone, waterDepth: window.waterDepth })
    }
    expect(await digestAgain(e.parts, later!, stored!, other)).not.toBe(stored!.resultDigest)
    await digestAgain(e.parts, later!, { ...stored!, computedAt: at(4) }, other)
    expect(seen.map(({ sensors }) => sensors[0]!.clockOffset)).toEqual([undefined, 0.3])
    // What is gone is told as such.
    expect(await digestAgain(e.parts, { ...timeline!, deployments: [] }, stored!, estimate)).toBeNull()
    expect(await digestAgain(e.parts, timeline!, { ...stored!, inputCommitId: 0 }, estimate)).toBeNull()
  })
})

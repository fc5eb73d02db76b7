import { deflateRawSync, inflateRawSync } from 'node:zlib'
import { beforeEach, describe, expect, it } from 'vitest'
import { createApp } from '../../server/app.ts'
import { Audit, ClockOffset, Estimate, EstimateDetail } from '../../server/models/index.ts'
import { signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { at, estimatingStation } from '../support/estimatingStation.ts'
import { makePerson } from '../support/factories.ts'
import { instantEstimators } from '../support/instantEstimators.ts'
import { storeSea } from '../support/storedSea.ts'

const e = estimatingStation()
let admin: Browser
let partner: Browser

beforeEach(async () => {
  const app = createApp(e.parts)
  admin = await signedIn(app, (await makePerson(e.parts.clock, { role: 'admin', name: 'Tessa Vorn' })).email)
  partner = await signedIn(app, (await makePerson(e.parts.clock, { role: 'partner' })).email)
})

const path = () => `/api/stations/${e.made.station.id}/clockOffsets`
const letter = () => e.made.sensors[1]!.letter

/** An estimate of the window that ends so many minutes after noon, which finds the clock of the second sensor wrong. */
async function found(minutes: number, clockOffset: number): Promise<void> {
  await storeSea(e.made, { from: at(minutes - 1), to: at(minutes), commitId: minutes })
  e.parts.clock.set(at(minutes))
  await (await e.start(instantEstimators())).wake()
  const key = { stationId: e.made.station.id, windowEndsAt: at(minutes), runId: 0, revision: 1 }
  const detail = await EstimateDetail.findOne({ where: key })
  const result = JSON.parse(inflateRawSync(detail!.payload).toString())
  const sensors = result.sensors.map((sensor: { id: string }) =>
    sensor.id === letter()
      ? { ...sensor, used: false, qualityFlag: 4, findings: ['clock'], clockOffset, clockOffsetSd: 0.03 }
      : sensor,
  )
  await EstimateDetail.update({ payload: deflateRawSync(JSON.stringify({ ...result, sensors })) }, { where: key })
}
const order = (minutes: number, changes: object = {}) => ({
  letter: letter(),
  windowEndsAt: at(minutes).toISOString(),
  revision: 1,
  reason: 'the logger lost its time server',
  ...changes,
})

describe('a clock offset that an estimate found', () => {
  it('is applied once, from now on, after an administrator has confirmed it', async () => {
    await found(1, -0.31)
    e.parts.clock.set(at(1, 30))
    const { body } = await admin.post(path()).send(order(1)).expect(201)
    expect(body).toEqual({
      letter: letter(),
      offsetSeconds: -0.31,
      sd: 0.03,
      validFrom: at(1, 30).toISOString(),
      confirmedBy: 'Tessa Vorn',
      reason: 'the logger lost its time server',
    })
    expect((await partner.get(path()).expect(200)).body).toEqual([body])
    const given: (number | undefined)[][] = []
    const watching = instantEstimators()
    watching.before = ({ window }) => void given.push(window.sensors.map(({ clockOffset }) => clockOffset))
    await storeSea(e.made, { from: at(1), to: at(2), commitId: 2 })
    e.parts.clock.set(at(2))
    await (await e.start(watching)).wake()
    expect(given).toEqual([e.made.sensors.map((sensor) => (sensor.letter === letter() ? -0.31 : undefined))])
    const [audit] = await Audit.findAll({ where: { action: 'clockOffset.confirm' }, order: [['id', 'DESC']] })
    expect(audit).toMatchObject({ before: null, after: { found: -0.31, offsetSeconds: -0.31 } })
    expect((await Estimate.findAll({ where: { stationId: e.made.station.id } })).length).toBe(2)
  })

  it('is added to the one that its estimate had put right already', async () => {
    await found(1, -0.31)
    e.parts.clock.set(at(1, 30))
    await admin.post(path()).send(order(1)).expect(201)
    await found(2, 0.06)
    const { body } = await admin.post(path()).send(order(2)).expect(201)
    expect(body.offsetSeconds).toBeCloseTo(-0.25, 9)
    expect(body.sd).toBeCloseTo(Math.hypot(0.03, 0.03), 9)
  })

  it('is not confirmed twice, nor without having been found', async () => {
    await found(1, -0.31)
    e.parts.clock.set(at(1, 30))
    await admin.post(path()).send(order(1)).expect(201)
    const again = await admin.post(path()).send(order(1)).expect(409)
    expect(again.body).toMatchObject({ code: 'clockOffset.confirmedMeanwhile', current: { offsetSeconds: -0.31 } })
    const other = await admin.post(path()).send(order(1, { letter: e.made.sensors[0]!.letter })).expect(409) // prettier-ignore
    expect(other.body.code).toBe('clockOffset.notFound')
    await admin.post(path()).send(order(9)).expect(404)
    await admin
      .post(path())
      .send(order(1, { reason: '' }))
      .expect(422)
    await partner.post(path()).send(order(1)).expect(403)
    expect(await ClockOffset.count({ where: { sensorId: e.made.sensors[1]!.sensorId } })).toBe(1)
  })
})

describe('the drift of levels', () => {
  it('is told from the windows that were kept, an hour apart, of the deployment in force alone', async () => {
    const { id: stationId } = e.made.station
    const hours = 48
    await storeSea(e.made, { from: at(-1), to: at(0), commitId: 1 })
    e.parts.clock.set(at(0))
    await (await e.start(instantEstimators())).wake()
    const [row] = await e.rows()
    const detail = await EstimateDetail.findOne({ where: { stationId, runId: 0 }, raw: true })
    const result = JSON.parse(inflateRawSync(detail!.payload).toString())
    for (let n = 1; n <= hours; n += 1) {
      const windowEndsAt = at(-60 * (hours - n))
      const sensors = result.sensors.map((sensor: { id: string }, index: number) => ({
        ...sensor,
        waterDepth: 12 + Math.sin(n) + (index === 2 ? (0.4 * n) / hours : 0),
      }))
      const key = { stationId, windowEndsAt, runId: 0, revision: 1 }
      await Estimate.upsert({ ...row!, ...key })
      await EstimateDetail.upsert({ ...key, payload: deflateRawSync(JSON.stringify({ ...result, sensors })) })
    }
    const { body } = await partner.get(`/api/stations/${stationId}/levelDrift`).expect(200)
    expect(body.map(({ flag }: { flag: number }) => flag)).toEqual([1, 1, 3, 1, 1])
    expect(body[2]).toMatchObject({ limit: 0.1, value: expect.closeTo(0.3, 1) })
    await partner.get('/api/stations/999999/levelDrift').expect(404)
  })
})

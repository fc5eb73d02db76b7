import type { Express } from 'express'
import { beforeAll, describe, expect, it } from 'vitest'
import { createApp } from '../../server/app.ts'
import { startComputeEstimates } from '../../server/jobs/computeEstimates.ts'
import { startKeepSeriesDays } from '../../server/jobs/keepSeriesDays.ts'
import { Deployment, Estimate, EstimateDetail, SeriesDay, Station } from '../../server/models/index.ts'
import { changeSetting } from '../../server/services/settings.ts'
import { beginLinks } from '../../server/services/readings/links.ts'
import { inTransaction } from '../../server/services/transaction.ts'
import { currentEstimate, estimateView, seriesView, stationView } from '../../shared/schemas/station.ts'
import { openBrowser, signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson, makeStation } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { instantEstimators } from '../support/instantEstimators.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { storeSea, surfaceArray } from '../support/storedSea.ts'

const noon = new Date('2026-12-01T12:00:00Z')
const at = (minutes: number, seconds = 0): Date => new Date(noon.getTime() + minutes * 60_000 + seconds * 1000)

let parts: TestParts
let app: Express
let browser: Browser
let made: StationMade
let silent: StationMade
beforeAll(async () => {
  parts = await testParts()
  parts.clock.set(noon)
  beginLinks(parts.clock)
  app = createApp(parts)
  made = await makeStation(parts.clock, { ...surfaceArray, code: 'AA' })
  silent = await makeStation(parts.clock, { code: 'BB' })
  await storeSea(made, { from: at(-30), to: at(12), commitId: 3 })
  parts.clock.set(at(12, 1))
  const job = await startComputeEstimates(parts, { estimators: instantEstimators(), isUnscheduled: true })
  await job.wake()
  await job.stop()
  browser = await signedIn(app, (await makePerson(parts.clock)).email)
})
const pathOf = ({ station }: StationMade, rest = '') => `/api/stations/${station.id}${rest}`

describe('stations', () => {
  it('are shown to people who are signed in, and to nobody else', async () => {
    await openBrowser(app).get('/api/stations').expect(401)
    const partner = await signedIn(app, (await makePerson(parts.clock, { role: 'partner' })).email)
    const { body } = await partner.get('/api/stations').expect(200)
    expect(body.map(({ code }: { code: string }) => code)).toEqual(['AA', 'BB'])
  })

  it('carry array, link, newest estimate and last trusted one', async () => {
    const { body } = await browser.get(pathOf(made)).expect(200)
    const station = stationView.parse(body)
    expect(station).toMatchObject({ code: 'AA', isLead: false, windowSeconds: 1200, hopSeconds: 60 })
    expect(station.deployment?.sensors.map(({ letter, kind }) => [letter, kind])).toEqual(
      [1, 2, 3, 4, 5].map((n) => [`AA-${n}`, 'surface']),
    )
    expect(station.link.lastReadingAt).toBe(at(12).toISOString())
    expect(station.estimate).toMatchObject({ windowEndsAt: at(12).toISOString(), resolved: true, sensorsUsed: 5 })
    expect(station.lastGood?.windowEndsAt).toBe(at(12).toISOString())
  })

  it('without readings say so, and have no estimate', async () => {
    const { body } = await browser.get(pathOf(silent)).expect(200)
    expect(stationView.parse(body)).toMatchObject({ link: { state: 'never' }, estimate: null, lastGood: null })
  })

  it('keep the last trusted vector beside a newer estimate without one', async () => {
    const row = { resolved: false, reason: 'no-resolvable-wave' }
    await Estimate.update(row, { where: { stationId: made.station.id, windowEndsAt: [at(11), at(12)] } })
    const { body } = await browser.get(pathOf(made)).expect(200)
    expect(body.estimate).toMatchObject({ windowEndsAt: at(12).toISOString(), reason: 'no-resolvable-wave' })
    expect(body.lastGood.windowEndsAt).toBe(at(10).toISOString())
    await Estimate.update({ resolved: true, reason: null }, { where: { stationId: made.station.id } })
  })

  it('name the lead station of the settings', async () => {
    const leadStationId = made.station.id
    await inTransaction(parts.sequelize, (transaction) =>
      changeSetting(parts, 'watch', { leadStationId }, { personId: null, reason: 'test' }, transaction),
    )
    const { body } = await browser.get('/api/stations').expect(200)
    expect(body.map(({ isLead }: { isLead: boolean }) => isLead)).toEqual([true, false])
  })

  it('out of service are not listed, and still answer by their number', async () => {
    await Station.update({ retiredAt: at(0) }, { where: { id: silent.station.id } })
    const { body } = await browser.get('/api/stations').expect(200)
    expect(body).toHaveLength(1)
    await browser.get(pathOf(silent)).expect(200)
    await browser.get('/api/stations/999').expect(404)
    await browser.get('/api/stations/1e2').expect(422)
  })

  it('list their surveys and settings, newest first', async () => {
    const { waterDepth, levelOfBed } = made.deployment
    await Deployment.create({
      stationId: made.station.id,
      validFrom: at(600),
      recordedAt: at(0),
      waterDepth,
      levelOfBed,
      reason: 'to come',
    })
    const { body } = await browser.get(pathOf(made, '/deployments')).expect(200)
    expect(body.map(({ validFrom }: { validFrom: string }) => validFrom)).toEqual([
      at(600).toISOString(),
      '2020-01-01T00:00:00.000Z',
    ])
    const settings = await browser.get(pathOf(made, '/settings')).expect(200)
    expect(settings.body).toMatchObject([{ id: made.settings.id, content: { windowSeconds: 1200 } }])
  })

  it('give the newest readings as traces', async () => {
    const { body } = await browser.get(pathOf(made, '/traces?seconds=30')).expect(200)
    expect(body).toMatchObject({ startsAt: at(11, 30).toISOString(), interval: 0.5, stationId: made.station.id })
    expect(body.values.map((series: number[]) => series.length)).toEqual([60, 60, 60, 60, 60])
    await browser.get(pathOf(silent, '/traces')).expect(404)
  })
})

describe('estimates', () => {
  it('are listed by the end of their window, as the station shows them', async () => {
    const query = `?from=${at(9).toISOString()}&to=${at(12).toISOString()}`
    const { body } = await browser.get(pathOf(made, `/estimates${query}`)).expect(200)
    const listed = body.map((row: unknown) => currentEstimate.parse(row))
    expect(listed.map(({ windowEndsAt }: { windowEndsAt: string }) => windowEndsAt)).toEqual(
      [10, 11, 12].map((n) => at(n).toISOString()),
    )
    expect((await browser.get(pathOf(made))).body.estimate).toEqual(listed.at(-1))
  })

  it('are refused over more than six hours, and over none', async () => {
    const from = at(-400).toISOString()
    await browser.get(pathOf(made, `/estimates?from=${from}&to=${at(0).toISOString()}`)).expect(422)
    await browser.get(pathOf(made, `/estimates?from=${from}&to=${from}`)).expect(422)
  })

  it('tell with the window how they were made', async () => {
    const { body } = await browser.get(pathOf(made, `/estimates/${at(5).toISOString()}`)).expect(200)
    const whole = estimateView.parse(body)
    expect(whole).toMatchObject({ inputCommitId: 3, deploymentId: made.deployment.id, settingsId: made.settings.id })
    expect(whole.detail?.waterDepthSource).toBe('level')
    expect(whole.note).toBeNull()
    const latest = await browser.get(pathOf(made, '/estimates/latest')).expect(200)
    expect(latest.body.windowEndsAt).toBe(at(12).toISOString())
  })

  it('show their newest revision, and an older one when it is asked for', async () => {
    const row = await Estimate.findOne({ where: { stationId: made.station.id, windowEndsAt: at(7) }, raw: true })
    await Estimate.create({ ...row!, revision: 2, origin: 'late', significantWaveHeight: 9 })
    const path = pathOf(made, `/estimates/${at(7).toISOString()}`)
    expect((await browser.get(path)).body).toMatchObject({ revision: 2, significantWaveHeight: 9, origin: 'late' })
    expect((await browser.get(`${path}?revision=1`)).body).toMatchObject({ revision: 1, origin: 'late' })
    await browser.get(`${path}?revision=3`).expect(404)
    await Estimate.destroy({ where: { stationId: made.station.id, revision: 2 } })
  })

  it('without readings behind them say so, and those past their retention have no detail', async () => {
    const where = { stationId: made.station.id, windowEndsAt: at(4) }
    await EstimateDetail.destroy({ where })
    await Estimate.update({ origin: 'demonstration' }, { where })
    const { body } = await browser.get(pathOf(made, `/estimates/${at(4).toISOString()}`)).expect(200)
    expect(body.detail).toBeNull()
    expect(body.note).toBe('invented for the demonstration, no readings behind it')
  })

  it('of a window that was never computed are not there', async () => {
    await browser.get(pathOf(made, `/estimates/${at(13).toISOString()}`)).expect(404)
    await browser.get(pathOf(silent, '/estimates/latest')).expect(404)
    await browser.get(pathOf(made, '/estimates/yesterday')).expect(422)
  })
})

describe('series', () => {
  it('have the newest window of each step, and no point where there was none', async () => {
    const { body } = await browser.get(pathOf(made, '/series?hours=1&stepSeconds=300')).expect(200)
    const series = seriesView.parse(body)
    // Estimates end from -29 to 12; steps of five minutes end at -25, -20 … 10, and the last is under way.
    expect(series.points.map((point) => point.at)).toEqual(
      [-25, -20, -15, -10, -5, 0, 5, 10, 12].map((n) => at(n).toISOString()),
    )
    expect(series.points.at(-1)).toMatchObject({ resolved: true, qualityFlag: 1 })
  })

  it('are refused with more points than can be drawn', async () => {
    await browser.get(pathOf(made, '/series?hours=8784&stepSeconds=60')).expect(422)
  })

  it('come from packed days when they are older than two days', async () => {
    const point = (n: number) => ({ at: at(n).toISOString(), significantWaveHeight: expect.closeTo(1.2, 0) })
    parts.clock.set(at(4 * 24 * 60))
    const days = startKeepSeriesDays(parts, { isUnscheduled: true })
    await days.wake()
    await days.stop()
    const packed = await SeriesDay.findAll({ where: { subjectId: made.station.id }, raw: true })
    expect(new Set(packed.map(({ day, stepSeconds }) => `${day} ${stepSeconds}`))).toEqual(new Set(['2026-12-01 60']))
    expect(packed.find(({ quantity }) => quantity === 'significantWaveHeight')?.goodCount).toBe(42)
    const later = await signedIn(app, (await makePerson(parts.clock)).email)
    const { body } = await later.get(pathOf(made, '/series?hours=100&stepSeconds=300')).expect(200)
    const points = seriesView.parse(body).points
    expect(points.map((found) => found.at)).toEqual(
      [-25, -20, -15, -10, -5, 0, 5, 10, 12].map((n) => at(n).toISOString()),
    )
    expect(points.at(-1)).toMatchObject(point(12))
  })
})

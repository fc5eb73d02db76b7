import type { Express } from 'express'
import { beforeAll, beforeEach, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { Audit, Frame, Station, Stream } from '../../server/models/index.ts'
import { signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { draftContent, draftSensor, settingsContent, stationChange, stationDraft } from '../support/stationSetUp.ts'

let parts: TestParts
let app: Express
let browser: Browser
const noon = new Date('2026-12-01T12:00:00Z')
const at = (minutes: number): string => new Date(noon.getTime() + minutes * 60_000).toISOString()

beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
  browser = await signedIn(app, (await makePerson(parts.clock, { role: 'admin', name: 'A. Dmin' })).email)
})
beforeEach(() => parts.clock.set(noon))

let made = 0
async function station(): Promise<{ id: number; code: string; path: string }> {
  const code = `N${(made += 1)}`
  const { body } = await browser.post('/api/stations').send(stationDraft(code)).expect(201)
  return { id: body.id, code, path: `/api/stations/${body.id}` }
}

const actionsOf = async (id: number): Promise<string[]> =>
  (await Audit.findAll({ where: { entity: 'station', entityId: String(id) }, order: [['id', 'ASC']] })).map(({ action }) => action) // prettier-ignore

describe('a station', () => {
  test('is made with its settings, changed from its version, and the slower of two sees the difference', async () => {
    const { id, code, path } = await station()
    const record = await browser.get(`${path}/record`).expect(200)
    expect(record.headers.etag).toBe('"1"')
    expect(record.body).toMatchObject({ code, version: 1, state: 'active', sampleRate: 4, deployment: null, validKeys: 0, datumSurveyedOn: '2026-05-04' }) // prettier-ignore
    expect(record.body.settings).toMatchObject({ isInForce: true, author: 'A. Dmin', reason: 'New station' })
    const change = stationChange(code, { name: `Moved ${code}`, state: 'maintenance' })
    await browser.put(path).send(change).expect(428)
    const changed = await browser.put(path).set('If-Match', '"1"').send(change).expect(200)
    expect(changed.body).toMatchObject({ version: 2, state: 'maintenance', name: `Moved ${code}` })
    const late = await browser.put(path).set('If-Match', '"1"').send(stationChange(code)).expect(412)
    expect(late.body).toMatchObject({
      code: 'station.changedMeanwhile',
      current: { version: 2, name: `Moved ${code}` },
    })
    expect(await actionsOf(id)).toEqual(['station.create', 'station.change'])
  })

  test('with a name, short name or code that is taken is refused field by field, and nothing is made', async () => {
    const { code } = await station()
    const before = await Station.count()
    const { body } = await browser.post('/api/stations').send(stationDraft(code)).expect(422)
    expect(body.errors.map(({ path }: { path: string }) => path)).toEqual(['code', 'shortName', 'name'])
    expect(await Station.count()).toBe(before)
  })

  test('with figures that cannot be is refused where they stand', async () => {
    const estimate = { ...settingsContent.estimate, bandTo: 3 }
    const settings = { sampleRate: 4, content: { ...settingsContent, hopSeconds: 70, estimate } }
    const { body } = await browser.post('/api/stations').send(stationDraft('BAD1', { settings })).expect(422)
    expect(body.errors).toEqual([
      { path: 'settings.content.hopSeconds', message: 'the window must be a whole number of hops' },
      { path: 'settings.content.hopSeconds', message: 'a day must be a whole number of hops' },
      { path: 'settings.content.estimate.bandTo', message: 'must be at most 2 Hz, half the sample rate' },
    ])
    const off = await browser.post('/api/stations').send(stationDraft('BAD2', { latitude: 91, staleAfterSeconds: 5 })).expect(422) // prettier-ignore
    expect(off.body.errors.map(({ path }: { path: string }) => path)).toEqual(['latitude', 'staleAfterSeconds'])
  })

  test('keeps its code once it has sent readings under it', async () => {
    const { id, path } = await station()
    await Stream.create({ stationId: id, streamUuid: crypto.randomUUID(), createdAt: noon })
    const { body } = await browser.put(path).set('If-Match', '"1"').send(stationChange('OTHER')).expect(422)
    expect(body.errors[0].path).toBe('code')
  })

  test('is retired and restored with a reason, comes back in maintenance, and is found among the records all along', async () => {
    const { id, path } = await station()
    const reason = 'Storm took the frame'
    await browser.post(`${path}/retire`).set('If-Match', '"1"').send({ reason: 'x' }).expect(422)
    const retired = await browser.post(`${path}/retire`).set('If-Match', '"1"').send({ reason }).expect(200)
    expect(retired.body).toMatchObject({ state: 'retired', retiredAt: noon.toISOString(), version: 2 })
    const shown = (await browser.get('/api/stations').expect(200)).body.map((one: { id: number }) => one.id)
    expect(shown).not.toContain(id)
    const all = (await browser.get('/api/stationRecords').expect(200)).body.map((one: { id: number }) => one.id)
    expect(all).toContain(id)
    await browser.post(`${path}/retire`).set('If-Match', '"2"').send({ reason }).expect(409)
    const restored = await browser.post(`${path}/restore`).set('If-Match', '"2"').send({ reason }).expect(200)
    expect(restored.body).toMatchObject({ state: 'maintenance', retiredAt: null, version: 3 })
    expect(await actionsOf(id)).toEqual(['station.create', 'station.retire', 'station.restore'])
  })
})

describe('settings of a station', () => {
  test('are ordered for later without touching those in force, and never for the past', async () => {
    const { path } = await station()
    const order = { sampleRate: 2, content: { ...settingsContent, windowSeconds: 1200 }, reason: 'New loggers' }
    await browser.post(`${path}/settings`).set('If-Match', '"1"').send({ ...order, validFrom: at(-1) }).expect(422) // prettier-ignore
    const later = await browser.post(`${path}/settings`).set('If-Match', '"1"').send({ ...order, validFrom: at(30) }).expect(201) // prettier-ignore
    expect(later.body).toMatchObject({ isInForce: false, sampleRate: 2 })
    expect((await browser.get(`${path}/record`)).body).toMatchObject({ sampleRate: 4, version: 2, comingSettings: [{ sampleRate: 2 }] }) // prettier-ignore
    parts.clock.set(new Date(at(31)))
    expect((await browser.get(`${path}/record`)).body).toMatchObject({ sampleRate: 2, comingSettings: [] })
    expect((await browser.get(path)).body).toMatchObject({ sampleRate: 2, windowSeconds: 1200 })
    const history = (await browser.get(`${path}/settings/history`).expect(200)).body
    expect(history.map((one: { sampleRate: number; isInForce: boolean }) => [one.sampleRate, one.isInForce])).toEqual([[2, true], [4, false]]) // prettier-ignore
  })
})

describe('a deployment', () => {
  async function drafted(content = draftContent()) {
    const made = await station()
    const path = `${made.path}/deploymentDrafts`
    const order = { basedOnId: null, correctsId: null, content }
    const { body } = await browser.post(path).send(order).expect(201)
    return { ...made, path, draftPath: `${path}/${body.id}`, station: made.path }
  }
  const inForce = (draftPath: string, body: object, version = '"1"') =>
    browser.post(`${draftPath}/putInForce`).set('If-Match', version).send({ validFrom: null, reason: 'Surveyed', resolved: [], ...body }) // prettier-ignore

  test('is drafted, changed from its version, checked and put in force from now', async () => {
    const { id, path, draftPath, station } = await drafted()
    await browser.post(path).send({ basedOnId: null, correctsId: null, content: draftContent() }).expect(409)
    await browser
      .put(draftPath)
      .set('If-Match', '"1"')
      .send(draftContent({ waterDepth: 9.1 }))
      .expect(200)
    const late = await browser.put(draftPath).set('If-Match', '"1"').send(draftContent()).expect(412)
    expect(late.body.current).toMatchObject({ version: 2, content: { waterDepth: 9.1 } })
    const check = await browser.get(`${draftPath}/designCheck`).expect(200)
    expect(check.body.findings.filter(({ quality }: { quality: string }) => quality !== 'good')).toEqual([])
    const { body } = await inForce(draftPath, {}, '"2"').expect(201)
    expect(body).toMatchObject({ number: 1, isInForce: true, author: 'A. Dmin', reason: 'Surveyed', waterDepth: 9.1 })
    expect((await browser.get(station)).body.deployment.sensors).toHaveLength(5)
    await browser.get(draftPath).expect(404)
    expect(await actionsOf(id)).toEqual(['station.create', 'deploymentDraft.add', 'deploymentDraft.change', 'deployment.putInForce']) // prettier-ignore
  })

  test('with an open check is refused until each has a written reason, which is kept', async () => {
    const three = draftContent({ sensors: draftContent().sensors.slice(0, 3) })
    const { draftPath, station } = await drafted(three)
    const refused = await inForce(draftPath, {}).expect(409)
    expect(refused.body.code).toBe('deployment.checkUnresolved')
    const checks = refused.body.current.map(({ check }: { check: string }) => check)
    expect(checks).toEqual(['count', 'loss'])
    expect((await browser.get(station)).body.deployment).toBeNull()
    const resolved = checks.map((check: string) => ({ check, reason: 'Two loggers come in spring' }))
    const { body } = await inForce(draftPath, { resolved }).expect(201)
    expect(body.resolved).toEqual(resolved)
  })

  test('of sensors surveyed by bearing keeps what was measured and stands where it leads', async () => {
    const sensors = draftContent().sensors
    sensors[1] = { ...draftSensor('B', 0, 0), position: { by: 'polar', range: 14.3, bearing: 77.9, from: 'A' } }
    const { draftPath } = await drafted(draftContent({ sensors }))
    const { body } = await inForce(draftPath, {}).expect(201)
    expect(body.sensors[1]).toMatchObject({ position: { by: 'polar', range: 14.3, bearing: 77.9, from: 'A' } })
    expect(body.sensors[1].east).toBeCloseTo(13.982, 3)
  })

  test('with bearings that lead nowhere, or a sensor kilometres off, is refused at that sensor', async () => {
    const { path } = await drafted()
    const sensors = draftContent().sensors
    sensors[2] = { ...draftSensor('C', 0, 0), position: { by: 'polar', range: 1, bearing: 0, from: 'Z' } }
    sensors[3] = { ...draftSensor('D', 0, 0), position: { by: 'geographic', latitude: 48.4865, longitude: -21.0222 } }
    const { body } = await browser.post(path).send({ basedOnId: null, correctsId: null, content: draftContent({ sensors }) }).expect(422) // prettier-ignore
    expect(body.errors).toEqual([
      { path: 'content.sensors.2.position', message: 'there is no sensor Z to measure from' },
      { path: 'content.sensors.3.position', message: 'D stands 111.2 km from the station' },
    ])
  })

  test('that follows another is compared with it, asks why a sensor moved, and ends the one before', async () => {
    const { path, draftPath, station } = await drafted()
    const first = (await inForce(draftPath, {}).expect(201)).body
    parts.clock.set(new Date(at(60)))
    const next = (await browser.post(path).send({ basedOnId: first.id, correctsId: null, content: null }).expect(201)).body // prettier-ignore
    const sensors = [draftSensor('A', 0.4, 0), ...draftContent().sensors.slice(1)]
    await browser.put(`${path}/${next.id}`).set('If-Match', '"1"').send(draftContent({ sensors })).expect(200)
    const { check, sentence } = (await inForce(`${path}/${next.id}`, {}, '"2"').expect(409)).body.current[0]
    expect({ check, sentence }).toEqual({ check: 'moved:A', sentence: 'A moved 0.40 m since deployment 1' })
    const resolved = [{ check: 'moved:A', reason: 'Dragged by an anchor' }]
    const second = (await inForce(`${path}/${next.id}`, { resolved, validFrom: at(90) }, '"2"').expect(201)).body
    expect(second).toMatchObject({ number: 2, isInForce: false, validFrom: at(90) })
    const comparison = (await browser.get(`${station}/deployments/${first.id}/comparison/${second.id}`).expect(200)).body // prettier-ignore
    expect(comparison.sensors[0]).toMatchObject({ letter: 'A', change: 'moved', movedBy: 0.4, movedToward: 90 })
    expect((await browser.get(`${station}/record`)).body).toMatchObject({ deployment: { number: 1 }, comingDeployments: [{ number: 2 }] }) // prettier-ignore
    parts.clock.set(new Date(at(91)))
    const history = (await browser.get(`${station}/deployments/history`).expect(200)).body
    expect(history.map((one: { number: number; isInForce: boolean; validUntil: string | null }) => [one.number, one.isInForce, one.validUntil])).toEqual([[2, true, null], [1, false, at(90)]]) // prettier-ignore
  })

  test('that would begin before readings that are stored is refused; a correction of the past is recorded beside it', async () => {
    const { id, path, draftPath, station } = await drafted()
    const first = (await inForce(draftPath, { validFrom: at(-600) }).expect(201)).body
    const stream = await Stream.create({ stationId: id, streamUuid: crypto.randomUUID(), createdAt: noon })
    const row = { streamId: stream.id, seq: 1, stationId: id, startsAt: new Date(at(-10)), sentAt: noon, arrivedAt: noon, commitId: 1 } // prettier-ignore
    await Frame.create({ ...row, sampleRate: 4, sampleCount: 20, digest: Buffer.alloc(32), payload: Buffer.alloc(8) })
    const copy = { basedOnId: first.id, correctsId: null, content: draftContent() }
    const next = (await browser.post(path).send(copy).expect(201)).body
    const refused = await inForce(`${path}/${next.id}`, { validFrom: at(-60) }).expect(422)
    expect(refused.body.errors[0].message).toMatch(/are stored with the array before: correct that version instead$/)
    const correction = (
      await browser
        .post(path)
        .send({ ...copy, correctsId: first.id })
        .expect(201)
    ).body
    expect(correction).toMatchObject({ number: 1, correctsId: first.id })
    parts.clock.set(new Date(at(5)))
    const corrected = (await inForce(`${path}/${correction.id}`, {}).expect(201)).body
    expect(corrected).toMatchObject({ number: 1, replacesId: first.id, isInForce: false, validFrom: at(-600) })
    expect((await browser.get(station)).body.deployment.id).toBe(first.id)
  })

  test('is discarded from its version, and a new one may begin', async () => {
    const { path, draftPath } = await drafted()
    await browser.delete(draftPath).expect(428)
    await browser.delete(draftPath).set('If-Match', '"1"').expect(204)
    expect((await browser.get(path).expect(200)).body).toEqual([])
    await browser.post(path).send({ basedOnId: null, correctsId: null, content: draftContent() }).expect(201)
  })

  test('is read from a survey file without changing anything', async () => {
    const { station } = await drafted()
    const defaults = { kind: 'surface', heightAboveBed: 0.5, positionSd: 0.05, clockSd: 0.002, pressureKind: 'gauge', levelOfBed: -9 } // prettier-ignore
    const question = { fileName: 'survey.csv', text: 'sensor;east;north\nA;1,5;2\nB;x;3\n', mapping: null, defaults }
    const { body } = await browser.post(`${station}/surveyPreviews`).send(question).expect(200)
    expect(body.sensors).toHaveLength(1)
    expect(body.faults).toEqual([expect.objectContaining({ line: 3, column: 'east' })])
  })
})

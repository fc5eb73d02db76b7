import { beforeAll, describe, expect, test } from 'vitest'
import type { Express } from 'express'
import { createApp } from '../../server/app.ts'
import { startKeepNotices } from '../../server/jobs/keepNotices.ts'
import type { KeepNotices } from '../../server/jobs/keepNotices.ts'
import { Audit, Delivery, LogEntry, Message, Observation, Outlook } from '../../server/models/index.ts'
import { placeView } from '../../shared/schemas/place.ts'
import type { PlaceView } from '../../shared/schemas/place.ts'
import { localFitView } from '../../shared/schemas/placeLocalFit.ts'
import type { LocalFitView } from '../../shared/schemas/placeLocalFit.ts'
import { makeList } from '../support/alerts.ts'
import { signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { makeSmallCoast, saveSea } from '../support/places.ts'
import type { SmallCoast } from '../support/places.ts'

const noon = new Date('2026-12-01T12:00:00Z')
const at = (minutes: number): Date => new Date(noon.getTime() + minutes * 60_000)

let parts: TestParts
let app: Express
let coast: SmallCoast
let admin: Browser
let operator: Browser
let patrol: Browser
let warden: Browser
let beach: number
let walk: number
let job: KeepNotices

beforeAll(async () => {
  parts = await testParts()
  parts.clock.set(noon)
  app = createApp(parts)
  const head = await makePerson(parts.clock, { name: 'Head of patrol', role: 'partner', team: 'beach safety' })
  patrol = await signedIn(app, head.email)
  warden = await signedIn(app, (await makePerson(parts.clock, { role: 'partner', team: 'harbour' })).email)
  operator = await signedIn(app, (await makePerson(parts.clock, { name: 'Duty officer A' })).email)
  admin = await signedIn(app, (await makePerson(parts.clock, { role: 'admin' })).email)
  const listId = await makeList(parts, 'Beach patrol', [head.id])
  coast = await makeSmallCoast(parts)
  beach = await coast.add('PS', { noticeListIds: [listId] })
  walk = await coast.add('LA')
  job = startKeepNotices(parts, { isUnscheduled: true })
})

const subjects = async (): Promise<string[]> =>
  (await Message.findAll({ where: { kind: 'notice' }, order: [['id', 'ASC']] })).map(({ subject }) => subject)
const noticesOf = async (placeId: number): Promise<PlaceView['notices']> =>
  placeView.parse((await operator.get(`/api/places/${placeId}`).expect(200)).body).notices

describe('a closure', () => {
  const closure = {
    ...{ kind: 'closure', area: 'From the root to the light', startsAt: null, expiresAt: at(60).toISOString() },
    reason: 'Water over the crest',
  }

  test('is set by a partner of the place’s team, and refused to another team and to an administrator', async () => {
    const refused = await warden.post(`/api/places/${beach}/notices`).send(closure)
    expect([refused.status, refused.body.code]).toEqual([403, 'notice.notYourTeam'])
    await admin.post(`/api/places/${beach}/notices`).send(closure).expect(403)
    const { body } = await patrol.post(`/api/places/${beach}/notices`).send(closure).expect(201)
    expect(body).toMatchObject({ state: 'inForce', by: { name: 'Head of patrol' }, reason: closure.reason, version: 1 })
    expect(await noticesOf(beach)).toMatchObject([{ id: body.id, state: 'inForce' }])
    const message = await Message.findOne({ where: { kind: 'notice' } })
    expect(message?.subject).toBe('Pennow Sands, in force: Closure: From the root to the light')
    expect(message?.text).toContain('By: Head of patrol, Tue 1 Dec 2026, 12:00 UTC')
    expect(await Delivery.count({ where: { messageId: message?.id } })).toBe(1)
    expect(await Audit.count({ where: { entity: 'notice', action: 'notice.set' } })).toBe(1)
    expect((await LogEntry.findOne({ where: { kind: 'notice' } }))?.text).toContain(
      'until 13:00 UTC. Water over the crest By',
    )
  })

  test('about to expire is told once, and expired it stays in sight until it is withdrawn', async () => {
    const [{ id }] = await noticesOf(beach)
    parts.clock.set(at(29))
    await job.wake()
    expect(await subjects()).toHaveLength(1)
    parts.clock.set(at(31))
    await job.wake()
    await job.wake()
    expect((await subjects()).slice(1)).toEqual(['Pennow Sands, about to expire: Closure: From the root to the light'])
    parts.clock.set(at(61))
    await job.wake()
    await job.wake()
    expect((await subjects()).slice(2)).toEqual([
      'Pennow Sands, expired, not withdrawn: Closure: From the root to the light',
    ])
    expect(await noticesOf(beach)).toMatchObject([{ id, state: 'expired' }])
    // It can still be extended, and is then in force once more.
    const extension = { expiresAt: at(240).toISOString(), reason: 'The sea is still high' }
    await patrol.put(`/api/notices/${id}`).send(extension).expect(428)
    const extended = await patrol.put(`/api/notices/${id}`).set('If-Match', '"1"').send(extension).expect(200)
    expect(extended.body).toMatchObject({ state: 'inForce', extensions: [{ reason: extension.reason }] })
    await operator.put(`/api/notices/${id}`).set('If-Match', '"1"').send(extension).expect(412)
    const withdraw = () => operator.post(`/api/notices/${id}/withdraw`).set('If-Match', '"2"').send({ reason: 'The sea went down' }) // prettier-ignore
    expect((await withdraw().expect(200)).body).toMatchObject({
      state: 'withdrawn',
      withdrawnBy: { name: 'Duty officer A' },
    })
    expect(await noticesOf(beach)).toEqual([])
    const last = await Message.findOne({ where: { kind: 'notice' }, order: [['id', 'DESC']] })
    expect(last?.text).toContain('That it is withdrawn does not mean that it is safe.')
    const { body } = await warden.get(`/api/places/${beach}/notices`).expect(200)
    expect(body.notices).toMatchObject([{ id, state: 'withdrawn', withdrawReason: 'The sea went down' }])
  })

  test('needs an end that lies ahead', async () => {
    const { body } = await operator
      .post(`/api/places/${walk}/notices`)
      .send({ ...closure, expiresAt: at(-5).toISOString() })
      .expect(422)
    expect(body.errors[0]).toMatchObject({ path: 'expiresAt', message: 'must lie in the future' })
  })
})

describe('a beach flag', () => {
  const flag = (key: string) => ({
    kind: 'flag',
    flag: key,
    startsAt: null,
    expiresAt: null,
    reason: 'Surf at low water',
  })

  test('takes the place of the one that flies, and keeps what it meant when the set changes', async () => {
    const yellow = await patrol.post(`/api/places/${beach}/notices`).send(flag('yellow')).expect(201)
    await patrol.post(`/api/places/${beach}/notices`).send(flag('red')).expect(201)
    expect(await noticesOf(beach)).toMatchObject([{ content: { flag: { key: 'red' } } }])
    const { body } = await operator.get(`/api/places/${beach}/notices`).expect(200)
    expect(body.notices.find(({ id }: { id: number }) => id === yellow.body.id)).toMatchObject({ state: 'replaced' })
    const { body: set } = await patrol.get('/api/beachFlags').expect(200)
    const changed = { ...set, flags: set.flags.filter(({ key }: { key: string }) => key !== 'red') }
    await patrol.put('/api/beachFlags').send({ flagSet: changed, reason: 'Ours' }).expect(403)
    await admin.put('/api/beachFlags').send({ flagSet: changed, reason: 'The local authority’s' }).expect(200)
    expect(await noticesOf(beach)).toMatchObject([{ content: { flag: { key: 'red', name: 'Red' } } }])
    expect((await patrol.post(`/api/places/${beach}/notices`).send(flag('red')).expect(422)).body.errors[0].path).toBe(
      'flag',
    )
  })

  test('is set at beaches alone', async () => {
    const { body } = await operator.post(`/api/places/${walk}/notices`).send(flag('yellow')).expect(422)
    expect(body.errors[0].message).toBe('flags are set at beaches')
  })
})

describe('observations', () => {
  const breakersSeen = (value: number, minutes: number) => ({ kind: 'breakerHeight', at: at(minutes).toISOString(), value, note: '' }) // prettier-ignore

  test('stand beside what was figured; partners log at their team’s places', async () => {
    await saveSea(parts, coast.stations.PB, at(10), { systems: [{ height: 1.2, period: 11, from: 230 }] })
    parts.clock.set(at(300))
    await warden.post(`/api/places/${beach}/observations`).send(breakersSeen(1.4, 12)).expect(403)
    const { body } = await patrol.post(`/api/places/${beach}/observations`).send(breakersSeen(1.4, 12)).expect(201)
    expect(body).toMatchObject({ value: 1.4, by: { name: 'Head of patrol' } })
    expect(body.predicted).toBeGreaterThan(1.2)
    const far = await patrol.post(`/api/places/${beach}/observations`).send(breakersSeen(1.4, 90)).expect(201)
    expect(far.body.predicted).toBeNull()
    const wrong = await patrol
      .post(`/api/places/${beach}/observations`)
      .send({ ...breakersSeen(1, 12), kind: 'crossSea' })
    expect(wrong.body.errors[0].path).toBe('kind')
    const later = await patrol.post(`/api/places/${beach}/observations`).send(breakersSeen(1.4, 400)).expect(422)
    expect(later.body.errors[0].path).toBe('at')
    await patrol.post(`/api/observations/${far.body.id}/withdraw`).send({ reason: 'Another beach' }).expect(200)
    const listed = await operator.get(`/api/places/${beach}/observations`).expect(200)
    expect(listed.body.observations).toHaveLength(2)
    expect(listed.body.counts[0]).toEqual({ kind: 'breakerHeight', count: 1, withPrediction: 1 })
  })

  const fitOfBreakers = async (): Promise<LocalFitView> =>
    localFitView.parse((await operator.get(`/api/places/${beach}/localFits`).expect(200)).body.fits[0])

  test('below 100 propose nothing', async () => {
    expect((await fitOfBreakers()).outcome).toMatchObject({ kind: 'refused', count: 1, needed: 100 })
    const adoption = { observed: 'breakerHeight', adopt: true, reason: 'Try' }
    const { body } = await admin
      .post(`/api/places/${beach}/localFits`)
      .set('If-Match', '"1"')
      .send(adoption)
      .expect(409)
    expect(body.code).toBe('localFit.refused')
  })

  test('of 120 over twelve days propose the factor they were made with, which is adopted as a version and applied', async () => {
    const { id: placeSettingsId } = placeView.parse((await operator.get(`/api/places/${beach}`)).body).settings
    // Ten a day for twelve days, each beside an outlook of its own.
    const pairs = Array.from({ length: 120 }, (_, n) => {
      const end = at(-1440 * (1 + Math.floor(n / 10)) + 60 * (n % 10))
      return { end, predicted: 0.8 + 0.1 * ((n * 7) % 13), scatter: 1 + 0.05 * Math.sin(n) }
    })
    await Outlook.bulkCreate(
      pairs.map(({ end, predicted }) => ({
        ...{ placeId: beach, windowEndsAt: end, revision: 1, windowStartsAt: end, computedAt: end, placeSettingsId },
        ...{
          stationId: coast.stations.PB.id,
          estimateRevision: 1,
          softwareVersion: 'test',
          qualityFlag: 1,
          reason: null,
        },
        ...{ figures: { breakerHeight: [predicted, 0.2, null, null, 1] }, payload: null },
      })),
    )
    await Observation.bulkCreate(
      pairs.map(({ end, predicted, scatter }) => ({
        ...{ placeId: beach, at: end, kind: 'breakerHeight' as const, value: 0.8 * predicted * scatter, note: '' },
        ...{ personId: null, createdAt: noon },
      })),
    )
    const view = await fitOfBreakers()
    expect(view.outcome).toMatchObject({ kind: 'fitted', verdict: 'better', fit: { kind: 'heights', count: 121 } })
    if (view.outcome.kind !== 'fitted' || view.outcome.fit.kind !== 'heights') throw new Error('not fitted')
    expect(view.outcome.fit.factor.value).toBeCloseTo(0.8, 2)
    const before = placeView.parse((await operator.get(`/api/places/${beach}`)).body)
    const adoption = { observed: 'breakerHeight', adopt: true, reason: 'A season of the patrol’s log' }
    await operator.post(`/api/places/${beach}/localFits`).set('If-Match', '"1"').send(adoption).expect(403)
    const adopted = await admin.post(`/api/places/${beach}/localFits`).set('If-Match', '"1"').send(adoption).expect(200)
    expect(adopted.body.settings).toMatchObject({ reason: adoption.reason, content: { localFits: [{ count: 121 }] } })
    parts.clock.set(at(310))
    await saveSea(parts, coast.stations.PB, at(310), { systems: [{ height: 1.2, period: 11, from: 230 }] })
    const after = placeView.parse((await operator.get(`/api/places/${beach}`)).body)
    const valueOf = (place: PlaceView) => place.outlook?.figures[0].figure.value ?? 0
    expect(valueOf(after) / valueOf(before)).toBeCloseTo(view.outcome.fit.factor.value, 3)
    expect(after.outlook?.figures[0].figure.method.name).toContain('times a local factor')
    // The fit is of the bare prediction still: adopting it does not make it disappear.
    const again = await fitOfBreakers()
    expect(again.outcome).toMatchObject({ kind: 'fitted', fit: { factor: view.outcome.fit.factor } })
  })
})

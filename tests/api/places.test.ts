import { beforeAll, describe, expect, test } from 'vitest'
import type { Express } from 'express'
import { createApp } from '../../server/app.ts'
import { startComputeEstimates } from '../../server/jobs/computeEstimates.ts'
import { startKeepSeriesDays } from '../../server/jobs/keepSeriesDays.ts'
import { startJudgeLimits } from '../../server/jobs/judgeLimits.ts'
import { Alert, Audit, Message, Outlook, PlaceSettings, SeriesDay } from '../../server/models/index.ts'
import { unpackDay } from '../../server/models/seriesDayPayload.ts'
import { outlookView, placeSeriesView } from '../../shared/schemas/placeOutlook.ts'
import { placeView } from '../../shared/schemas/place.ts'
import type { PlaceView } from '../../shared/schemas/place.ts'
import { makeList } from '../support/alerts.ts'
import { signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson, makeStation } from '../support/factories.ts'
import { instantEstimators } from '../support/instantEstimators.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { makeSmallCoast, saveSea } from '../support/places.ts'
import type { SmallCoast } from '../support/places.ts'
import { storeSea, surfaceArray } from '../support/storedSea.ts'

const noon = new Date('2026-12-01T12:00:00Z')
const at = (minutes: number): Date => new Date(noon.getTime() + minutes * 60_000)

let parts: TestParts
let app: Express
let coast: SmallCoast
let admin: Browser
let operator: Browser
let partner: Browser
let entrance: number
let beach: number
let officerId: number

beforeAll(async () => {
  parts = await testParts()
  parts.clock.set(noon)
  app = createApp(parts)
  const officer = await makePerson(parts.clock, { name: 'Duty officer A' })
  officerId = officer.id
  admin = await signedIn(app, (await makePerson(parts.clock, { role: 'admin' })).email)
  operator = await signedIn(app, officer.email)
  partner = await signedIn(app, (await makePerson(parts.clock, { role: 'partner', team: 'harbour' })).email)
  coast = await makeSmallCoast(parts)
  entrance = await coast.add('EN')
  beach = await coast.add('PS')
})

async function placeOf(id: number, browser: Browser = operator): Promise<PlaceView> {
  return placeView.parse((await browser.get(`/api/places/${id}`).expect(200)).body)
}

const figureOf = (place: PlaceView, quantity: string) =>
  place.outlook?.figures.find((figure) => figure.quantity === quantity)

/** E[sin²(θ − axis)] over cos^2s((θ − θ₀)/2), summed in steps of a quarter of a degree. */
function shareAcross(toward: number, spreadDegrees: number, axis: number): number {
  const radians = (degrees: number) => (degrees * Math.PI) / 180
  const s = 2 / radians(spreadDegrees) ** 2 - 1
  let [whole, across] = [0, 0]
  for (let off = -180; off < 180; off += 0.25) {
    const density = Math.cos(radians(off) / 2) ** (2 * s)
    whole += density
    across += density * Math.sin(radians(toward + off - axis)) ** 2
  }
  return across / whole
}

describe('an outlook', () => {
  test('comes with each estimate, stored with its settings and told with both sides and ±', async () => {
    parts.clock.set(at(1))
    await saveSea(parts, coast.stations.FW, at(1), {
      systems: [
        { height: 1.9, period: 12.5, from: 241, spread: 13 },
        { height: 0.9, period: 5.6, from: 288, spread: 35, name: 'wind sea' },
      ],
    })
    const place = await placeOf(entrance)
    const { outlook } = place
    expect(outlook).toMatchObject({ windowEndsAt: at(1).toISOString(), revision: 1, qualityFlag: 1, reason: null })
    expect(outlook?.source).toMatchObject({ name: 'Station FW', isSubstitute: false, estimateRevision: 1 })
    expect(outlook?.settingsId).toBe(place.settings.id)
    const across = Math.hypot(1.9 * Math.sqrt(shareAcross(61, 13, 38)), 0.9 * Math.sqrt(shareAcross(108, 35, 38)))
    const crossSea = figureOf(place, 'crossSea')
    expect(crossSea?.figure.value).toBeCloseTo(across, 2)
    expect(crossSea?.figure.sd).toBeGreaterThan(0.03)
    expect(crossSea?.figure.words).toBe('from the port quarter, setting to starboard, inbound 038° T')
    expect(crossSea?.caution).toMatch(/master/)
    expect(outlook?.courses.map(({ name, meets, setsTo }) => [name, meets, setsTo])).toEqual([
      ['Inbound', 'following', 'starboard'],
      ['Outbound', 'head sea', 'port'],
    ])
    const whole = await operator.get(`/api/places/${entrance}/outlooks/${at(1).toISOString()}`).expect(200)
    expect(outlookView.parse(whole.body)).toEqual(outlook)
  })

  test('of a station gone stale comes from the substitute, says so and widens its ±', async () => {
    const sea = { systems: [{ height: 1.6, period: 12, from: 230 }] }
    await saveSea(parts, coast.stations.PB, at(2), sea)
    parts.clock.set(at(2))
    const own = figureOf(await placeOf(beach), 'breakerHeight')
    // Within the stale limit of Pennow Bar (15 min) Fairway does not take over.
    parts.clock.set(at(16))
    await saveSea(parts, coast.stations.FW, at(16), sea)
    expect((await placeOf(beach)).outlook?.windowEndsAt).toBe(at(2).toISOString())
    parts.clock.set(at(18))
    await saveSea(parts, coast.stations.FW, at(18), sea)
    const place = await placeOf(beach)
    expect(place.outlook).toMatchObject({ windowEndsAt: at(18).toISOString(), qualityFlag: 3 })
    expect(place.outlook?.source).toMatchObject({ name: 'Station FW', isSubstitute: true })
    expect(place.outlook?.substituteWords).toMatch(
      /^Not measured here\. Station PB is stale, last estimate 12:02 UTC\. Station FW's figures stand in: 15 %/,
    )
    const figure = figureOf(place, 'breakerHeight')
    expect(figure?.qualityFlag).toBe(3)
    expect(figure?.figure.sd).toBeGreaterThan((own?.figure.sd ?? 0) + 0.05)
    // Back again, for a window that the substitute had taken: it is the place's own figure once more.
    await saveSea(parts, coast.stations.PB, at(18), sea)
    const back = await placeOf(beach)
    expect(back.outlook).toMatchObject({ revision: 2, substituteWords: null, qualityFlag: 1 })
  })

  test('says why there is no figure when no station can feed the place', async () => {
    parts.clock.set(at(40))
    await saveSea(parts, coast.stations.FW, at(40), { reason: 'ambiguous' })
    const place = await placeOf(entrance)
    expect(place.outlook).toMatchObject({ qualityFlag: 9, source: null, figures: [] })
    expect(place.outlook?.reason).toBe(
      'Station FW gives no direction: direction ambiguous, H_m0 1.50 m; Station OL has no estimate.',
    )
    expect(place.lastGood).toMatchObject({ stationName: 'Station FW', windowEndsAt: at(18).toISOString() })
    const series = await operator
      .get(`/api/places/${entrance}/series?quantity=crossSea&hours=2&stepSeconds=60`)
      .expect(200)
    const { points } = placeSeriesView.parse(series.body)
    expect(points.map(({ at: end, value }) => [end, value === null])).toEqual([
      [at(1).toISOString(), false],
      [at(16).toISOString(), false],
      [at(18).toISOString(), false],
      [at(40).toISOString(), true],
    ])
  })

  test('is written by the job in the transaction of the estimate', async () => {
    parts.clock.set(noon)
    const made = await makeStation(parts.clock, surfaceArray)
    const draft = coast.draftOf('B36')
    const { body } = await admin
      .post('/api/places')
      .send({
        ...draft,
        settings: { ...draft.settings, stationOrder: [{ stationId: made.station.id, factor: { value: 1, sd: 0, source: 'test gauge' }, isInBasin: true }] }, // prettier-ignore
      })
      .expect(201)
    await storeSea(made, { from: at(0), to: at(2), commitId: 1 })
    parts.clock.set(new Date(at(2).getTime() + 1000))
    const job = await startComputeEstimates(parts, { estimators: instantEstimators(), isUnscheduled: true })
    await job.wake()
    await job.stop()
    const rows = await Outlook.findAll({ where: { placeId: body.id }, order: ['windowEndsAt'] })
    expect(rows.map(({ windowEndsAt, reason }) => [windowEndsAt.toISOString(), reason])).toEqual([
      [at(1).toISOString(), expect.stringContaining('no hour of readings')],
      [at(2).toISOString(), expect.stringContaining('no hour of readings')],
    ])
  })
})

describe('a limit at a place', () => {
  test('raises an alert by its outlooks, with an e-mail that names the place, both senses and its caution', async () => {
    const listId = await makeList(parts, 'Harbour duty', [officerId])
    parts.clock.set(at(60))
    const condition = {
      ...{ comparisons: [{ kind: 'above', quantity: 'crossSea', raise: 1, clear: 0.85, riseOverSeconds: null }] },
      ...{ when: null, onDelaySeconds: 60, offDelaySeconds: 60, clearSigmas: 1, worstQuality: 3, latches: false },
    }
    const content = {
      ...{ title: null, condition, priority: 'high', schedule: null, note: '', toCheck: 'Pilots.', reviewOn: null },
      recipients: { steps: [{ afterSeconds: 0, listIds: [listId] }], remindEverySeconds: null },
      isPublished: false,
    }
    const draft = { subjectKind: 'place', subjectId: entrance, content, reason: 'Port order 4' }
    const { body: limit } = await operator.post('/api/limits').send(draft).expect(201)
    const job = startJudgeLimits(parts, { isUnscheduled: true })
    const high = { systems: [{ height: 2.4, period: 12.5, from: 255, spread: 13 }] }
    for (const minute of [61, 62, 63]) {
      parts.clock.set(at(minute))
      await saveSea(parts, coast.stations.FW, at(minute), high)
      await job.wake()
    }
    const alert = await Alert.findOne({ where: { limitId: limit.id } })
    expect(alert).toMatchObject({ state: 'unacknowledgedActive', windowEndsAt: at(63), raisedAt: at(62) })
    const message = await Message.findOne({ where: { alertId: alert?.id } })
    expect(message?.subject).toMatch(/^High: Cross-sea, Marrowick Entrance 1\.\d\d m ± 0\.\d\d$/)
    expect(message?.text).toContain('from the port quarter, setting to starboard, inbound 038° T')
    expect(message?.text).toContain('Swell from 255° T, toward 075° T, 2.4 m, 12.5 s, at Station FW')
    expect(message?.text).toMatch(/master’s and pilot’s judgement/)
    const place = await placeOf(entrance, partner)
    expect(place.limits).toMatchObject([
      { quantity: 'crossSea', raise: 1, clear: 0.85, isActive: true, openAlertId: alert?.id },
    ])
    // Nothing is known for a while: it holds. Then a lower sea clears it.
    parts.clock.set(at(64))
    await saveSea(parts, coast.stations.FW, at(64), { reason: 'ambiguous' })
    await job.wake()
    expect((await alert?.reload())?.state).toBe('unacknowledgedActive')
    for (const minute of [65, 66, 67]) {
      parts.clock.set(at(minute))
      await saveSea(parts, coast.stations.FW, at(minute), { systems: [{ height: 1, period: 12.5, from: 240 }] })
      await job.wake()
    }
    expect((await alert?.reload())?.state).toBe('returnedUnacknowledged')
    await job.stop()
    const refused = await admin
      .delete(`/api/places/${entrance}`)
      .set('If-Match', '"1"')
      .send({ reason: 'No longer used' })
    expect([refused.status, refused.body.code]).toEqual([409, 'place.hasLimits'])
  })

  test('is refused a quantity that its kind of place does not have', async () => {
    const condition = {
      ...{
        comparisons: [{ kind: 'above', quantity: 'overtopping', raise: 0.001, clear: 0.001, riseOverSeconds: null }],
      },
      ...{ when: null, onDelaySeconds: 0, offDelaySeconds: 0, clearSigmas: 1, worstQuality: 3, latches: false },
    }
    const content = {
      ...{ title: null, condition, priority: 'low', schedule: null, note: '', toCheck: '', reviewOn: null },
      ...{ recipients: { steps: [], remindEverySeconds: null }, isPublished: false },
    }
    const draft = { subjectKind: 'place', subjectId: entrance, content, reason: 'To be tried' }
    const { body } = await operator.post('/api/limits').send(draft).expect(422)
    expect(body.errors).toMatchObject([{ path: 'content.condition.comparisons.0.quantity' }])
  })
})

describe('a closed day of a place', () => {
  test('is packed with its ± and flags, and a draft is tried on it', async () => {
    parts.clock.set('2026-12-02T00:30:00Z')
    const job = startKeepSeriesDays(parts, { isUnscheduled: true })
    await job.wake()
    await job.stop()
    const where = { subjectKind: 'place', subjectId: entrance, day: '2026-12-01' }
    const packed = await SeriesDay.findAll({ where, order: ['quantity'] })
    expect(packed.map(({ quantity }) => quantity)).toEqual(['alongSea', 'alongSeaSd', 'crossSea', 'crossSeaSd', 'placeHeight', 'placeHeightSd']) // prettier-ignore
    const { values, flags } = unpackDay(packed[2].payload)
    const stepSeconds = packed[2].stepSeconds
    expect(values[(12 * 3600 + 61 * 60) / stepSeconds]).toBeGreaterThan(1)
    expect([flags[(12 * 3600 + 61 * 60) / stepSeconds], flags[(12 * 3600 + 64 * 60) / stepSeconds]]).toEqual([1, 9])
    const condition = {
      ...{ comparisons: [{ kind: 'above', quantity: 'crossSea', raise: 1, clear: 0.85, riseOverSeconds: null }] },
      ...{ when: null, onDelaySeconds: 60, offDelaySeconds: 60, clearSigmas: 1, worstQuality: 3, latches: false },
    }
    const question = { subjectKind: 'place', subjectId: entrance, condition, days: 7 }
    const { body } = await operator.post('/api/backTests').send(question).expect(200)
    expect(body.draft).toMatchObject({ count: 1, raise: 1, episodes: [{ raisedAt: at(62).toISOString() }] })
  })
})

describe('the administrator of places', () => {
  test('adds one, changes it with the version that was seen, and gives it settings with a reason', async () => {
    const draft = coast.draftOf('LA')
    await operator.post('/api/places').send(draft).expect(403)
    const { body } = await admin.post('/api/places').send(draft).expect(201)
    const made = placeView.parse(body)
    expect(made).toMatchObject({ version: 1, kind: 'breakwater', outlook: null, notices: [], limits: [] })
    const { settings, reason, ...described } = draft
    const change = { ...described, shortName: 'The walk', reason }
    await admin.put(`/api/places/${made.id}`).send(change).expect(428)
    expect(
      (await admin.put(`/api/places/${made.id}`).set('If-Match', '"1"').send(change).expect(200)).body.version,
    ).toBe(2)
    await admin.put(`/api/places/${made.id}`).set('If-Match', '"1"').send(change).expect(412)

    if (settings.kind !== 'breakwater') throw new Error('not a breakwater')
    const content = { ...settings, crestLevel: { value: 3.1, sd: 0.05, source: 'survey 2026' } }
    const past = { content, validFrom: at(-600).toISOString(), reason: 'Levelled anew' }
    const asked = () => admin.post(`/api/places/${made.id}/settings`).set('If-Match', '"2"')
    expect((await asked().send(past).expect(422)).body.errors[0]).toMatchObject({ path: 'validFrom' })
    const elsewhere = { ...content, stationOrder: [{ ...content.stationOrder[0], stationId: 99 }] }
    expect(
      (
        await asked()
          .send({ ...past, content: elsewhere, validFrom: null })
          .expect(422)
      ).body.errors,
    ).toMatchObject([{ path: 'content.stationOrder.0.stationId' }])
    const now = await asked()
      .send({ ...past, validFrom: null })
      .expect(200)
    expect(now.body.settings).toMatchObject({ reason: 'Levelled anew', content: { crestLevel: { value: 3.1 } } })
    const versions = await partner.get(`/api/places/${made.id}/settings`).expect(200)
    expect(versions.body.versions).toHaveLength(2)
    expect(await Audit.count({ where: { entity: 'place', entityId: String(made.id) } })).toBe(3)
    const retired = await admin.delete(`/api/places/${made.id}`).set('If-Match', '"3"').send({ reason: 'Walk removed' })
    expect(retired.body.retiredAt).not.toBeNull()
    expect((await operator.get('/api/places').expect(200)).body.places.map(({ id }: PlaceView) => id)).not.toContain(
      made.id,
    )
    await admin
      .post(`/api/places/${made.id}/restore`)
      .set('If-Match', '"4"')
      .send({ reason: 'Walk rebuilt' })
      .expect(200)
    expect(await PlaceSettings.count({ where: { placeId: made.id } })).toBe(2)
  })

  test('changes a caution and cannot leave one out', async () => {
    const { body: cautions } = await partner.get('/api/placeCautions').expect(200)
    const empty = { cautions: { ...cautions, overtopping: '' }, reason: 'Shorter' }
    expect((await admin.put('/api/placeCautions').send(empty).expect(422)).body.errors[0].path).toBe(
      'cautions.overtopping',
    )
    const own = { ...cautions, overtopping: 'The warden decides; the largest wave counts.' }
    expect((await admin.put('/api/placeCautions').send({ cautions: own, reason: 'Ours' }).expect(200)).body).toEqual(
      own,
    )
  })
})

import type { Express } from 'express'
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { noteOverdueBulletins } from '../../server/services/bulletins.ts'
import { changeSetting } from '../../server/services/settings.ts'
import { Audit, Delivery, LogEntry, Message } from '../../server/models/index.ts'
import type { Role } from '../../shared/schemas/session.ts'
import { makeList } from '../support/alerts.ts'
import { signedIn } from '../support/browser.ts'
import { makePerson, makeStation } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let app: Express

beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
})

async function browserOf(role: Role) {
  const person = await makePerson(parts.clock, { role })
  return { person, browser: await signedIn(app, person.email) }
}

const inHours = (hours: number): string => new Date(parts.clock.now().getTime() + hours * 3_600_000).toISOString()

const officeAsks = (asksSecondPerson: boolean, isPublic = false): Promise<void> =>
  parts.sequelize.transaction((transaction) =>
    changeSetting(parts, 'bulletins', { asksSecondPerson, isPublic }, { personId: null, reason: 'test' }, transaction),
  )

let listsMade = 0
async function scene() {
  const { person, browser } = await browserOf('operator')
  const reader = await makePerson(parts.clock, { role: null, name: 'Pilot station' })
  listsMade += 1
  const listId = await makeList(parts, `List ${listsMade}`, [reader.id])
  const { id: stationId } = (await makeStation(parts.clock)).station
  const draft = {
    ...{ marker: 'warning', audience: 'Entrance', headline: 'Building swell', meaning: 'Cross-sea above 1.0 m.' },
    ...{ validFrom: inHours(0), validUntil: inHours(6), nextIssueAt: inHours(6), replacesId: null },
    ...{ listIds: [listId], chosen: [`station:${stationId}`] },
  }
  return { person, browser, reader, draft }
}

describe('a draft of a bulletin', () => {
  test('keeps the figures as they were frozen, and the slower of two is refused with 412', async () => {
    const { browser, draft } = await scene()
    const added = await browser.post('/api/bulletins').send(draft).expect(201)
    expect(added.body).toMatchObject({ status: 'draft', number: null, version: 1, reach: { people: 1 } })
    // The station of the test has never sent anything: said, not left out.
    expect(added.body.figures).toMatchObject([{ kind: 'missing', reason: 'no reading was ever received' }])
    const path = `/api/bulletins/${added.body.id}`
    const body = { draft: { ...draft, headline: 'Swell building fast' }, freezeAgain: false }
    await browser.put(path).send(body).expect(428)
    const changed = await browser.put(path).set('If-Match', '"1"').send(body).expect(200)
    expect(changed.body).toMatchObject({ version: 2, headline: 'Swell building fast' })
    const late = await browser.put(path).set('If-Match', '"1"').send(body).expect(412)
    expect(late.body.current.headline).toBe('Swell building fast')
    await browser.delete(path).set('If-Match', '"2"').expect(204)
    await browser.get(path).expect(404)
  })

  test('that is not ready is refused field by field, and nothing goes out', async () => {
    const { browser, draft } = await scene()
    await officeAsks(false)
    const before = await Message.count()
    const incomplete = { ...draft, headline: '', listIds: [], validUntil: inHours(-1) }
    const { body } = await browser.post('/api/bulletins').send(incomplete).expect(201)
    const refused = await browser.post(`/api/bulletins/${body.id}/issue`).set('If-Match', '"1"').send({}).expect(422)
    const paths = refused.body.errors.map(({ path }: { path: string }) => path)
    expect(paths).toEqual(['headline', 'listIds', 'validUntil', 'validUntil'])
    expect(await Message.count()).toBe(before)
  })
})

describe('a bulletin issued', () => {
  test('is frozen, numbered, sent to its lists, logged and audited in one go', async () => {
    const { browser, person, reader, draft } = await scene()
    await officeAsks(false)
    const { body: made } = await browser.post('/api/bulletins').send(draft).expect(201)
    const issued = await browser.post(`/api/bulletins/${made.id}/issue`).set('If-Match', '"1"').send({}).expect(200)
    expect(issued.body).toMatchObject({ status: 'issued', draft: null, reach: { people: 1 } })
    expect(issued.body.number).toMatch(/^\d{4}-\d+$/)
    const message = await Message.findOne({ where: { bulletinId: made.id }, rejectOnEmpty: true })
    expect(message.text).toContain('WARNING: Building swell')
    const deliveries = await Delivery.findAll({ where: { messageId: message.id } })
    expect(deliveries.map(({ personId }) => personId)).toEqual([reader.id])
    const line = await LogEntry.findOne({ where: { kind: 'bulletin' }, order: [['id', 'DESC']], rejectOnEmpty: true })
    expect(line.text).toContain(`Bulletin ${issued.body.number} issued: Building swell. E-mail to 1 person.`)
    const audits = await Audit.findAll({ where: { entity: 'bulletin', entityId: String(made.id) } })
    expect(audits.map(({ action, personId }) => [action, personId])).toEqual([
      ['bulletin.draft', person.id],
      ['bulletin.issue', person.id],
    ])
    const again = await browser.post(`/api/bulletins/${made.id}/issue`).set('If-Match', '"2"').send({}).expect(409)
    expect(again.body.code).toBe('bulletin.wrongState')
  })

  test('is replaced by the next of its chain, which names it, and cannot be replaced twice', async () => {
    const { browser, draft } = await scene()
    await officeAsks(false)
    const issue = async (content: object): Promise<{ id: number; number: string; chainId: number }> => {
      const { body } = await browser.post('/api/bulletins').send(content).expect(201)
      const done = await browser.post(`/api/bulletins/${body.id}/issue`).set('If-Match', '"1"').send({}).expect(200)
      return done.body
    }
    const first = await issue(draft)
    const second = await issue({ ...draft, replacesId: first.id })
    expect(second).toMatchObject({ chainId: first.chainId, replaces: first.number })
    const old = await browser.get(`/api/bulletins/${first.id}`).expect(200)
    expect(old.body).toMatchObject({ status: 'replaced', headline: 'Building swell' })
    await browser
      .post('/api/bulletins')
      .send({ ...draft, replacesId: first.id })
      .expect(422)
  })

  test('is cancelled with a reason that its readers get', async () => {
    const { browser, draft } = await scene()
    await officeAsks(false)
    const { body: made } = await browser.post('/api/bulletins').send(draft).expect(201)
    await browser.post(`/api/bulletins/${made.id}/issue`).set('If-Match', '"1"').send({}).expect(200)
    const path = `/api/bulletins/${made.id}/cancel`
    const cancelled = await browser.post(path).set('If-Match', '"2"').send({ reason: 'Swell went down' }).expect(200)
    expect(cancelled.body).toMatchObject({ status: 'cancelled', cancelled: { reason: 'Swell went down' } })
    const messages = await Message.findAll({ where: { bulletinId: made.id }, order: [['id', 'ASC']] })
    expect(messages.at(-1)?.subject).toContain('Cancelled: bulletin')
    expect(messages.at(-1)?.text).toContain('Swell went down')
  })

  test('asks for a second operator or a written reason where the office has set it', async () => {
    const { browser, person, draft } = await scene()
    await officeAsks(true)
    const { body: made } = await browser.post('/api/bulletins').send(draft).expect(201)
    const path = `/api/bulletins/${made.id}/issue`
    await browser.post(path).set('If-Match', '"1"').send({}).expect(422)
    const own = { consent: { email: person.email, password: 'wrong passphrase' } }
    await browser.post(path).set('If-Match', '"1"').send(own).expect(422)
    const alone = { aloneReason: 'Second officer is at sea with the pilot boat' }
    const issued = await browser.post(path).set('If-Match', '"1"').send(alone).expect(200)
    expect(issued.body).toMatchObject({ status: 'issued', consentBy: null, aloneReason: alone.aloneReason })
    const told = await Message.findOne({ where: { kind: 'alone', bulletinId: made.id }, rejectOnEmpty: true })
    expect(told.text).toContain('without a second pair of eyes')
  })

  test('whose next issue is overdue is told in the watch log once', async () => {
    const { browser, draft } = await scene()
    await officeAsks(false)
    const { body: made } = await browser.post('/api/bulletins').send(draft).expect(201)
    await browser.post(`/api/bulletins/${made.id}/issue`).set('If-Match', '"1"').send({}).expect(200)
    await noteOverdueBulletins(parts)
    const lines = async () =>
      (await LogEntry.findAll({ where: { kind: 'bulletin' } })).filter(({ text }) => text.includes('None was issued'))
    const before = (await lines()).length
    parts.clock.advance(6 * 3600 + 1)
    await noteOverdueBulletins(parts)
    await noteOverdueBulletins(parts)
    expect((await lines()).length).toBeGreaterThan(before)
    expect((await lines()).filter(({ links }) => JSON.stringify(links).includes(`${made.id}`))).toHaveLength(1)
  })
})

describe('the public page', () => {
  test('is not there until the office has switched it on, and then names nobody', async () => {
    const { browser, person, draft } = await scene()
    await officeAsks(false)
    const { body: made } = await browser.post('/api/bulletins').send(draft).expect(201)
    await browser.post(`/api/bulletins/${made.id}/issue`).set('If-Match', '"1"').send({}).expect(200)
    await browser.get('/api/publicBulletins').expect(404)
    await officeAsks(false, true)
    const { body } = await browser.get('/api/publicBulletins').expect(200)
    expect(body.bulletins.map(({ id }: { id: number }) => id)).toContain(made.id)
    expect(JSON.stringify(body)).not.toContain(person.name)
  })
})

import type { Express } from 'express'
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { Audit, Delivery, Message } from '../../server/models/index.ts'
import type { Role } from '../../shared/schemas/session.ts'
import { makeLimit, makeList } from '../support/alerts.ts'
import { signedIn } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
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

const content = (personIds: number[] = []) => ({
  name: 'Pilots',
  purpose: 'Who brings ships in',
  isSafety: true,
  members: personIds.map((personId) => ({ personId, hours: null, priorities: ['high', 'urgent'] })),
})

describe('a distribution list', () => {
  test('is added, changed with its version, and the slower of two is refused with 412', async () => {
    const { browser, person } = await browserOf('operator')
    const other = await makePerson(parts.clock, { role: null, name: 'Night pilot' })
    const added = await browser
      .post('/api/lists')
      .send(content([person.id]))
      .expect(201)
    const path = `/api/lists/${added.body.id}`
    await browser.put(path).send(content()).expect(428)
    const body = content([other.id, person.id])
    const changed = await browser.put(path).set('If-Match', '"1"').send(body).expect(200)
    expect(changed.body.version).toBe(2)
    expect(changed.body.members.map((member: { person: { name: string } }) => member.person.name)).toEqual([
      'Night pilot',
      person.name,
    ])
    const late = await browser.put(path).set('If-Match', '"1"').send(content()).expect(412)
    expect(late.body).toMatchObject({ code: 'list.changedMeanwhile', current: changed.body })
    const audits = await Audit.findAll({ where: { entity: 'list', entityId: String(added.body.id) } })
    expect(audits.map(({ action }) => action)).toEqual(['list.add', 'list.change'])
  })

  test('with nobody known, or somebody twice, is refused field by field', async () => {
    const { browser, person } = await browserOf('admin')
    const { body } = await browser
      .post('/api/lists')
      .send(content([person.id, 999_999, person.id]))
      .expect(422)
    expect(body.errors).toEqual([
      { path: 'members.1.personId', message: 'is not a person of this port' },
      { path: 'members.2.personId', message: 'is on the list already' },
    ])
  })

  test('that a limit sends to stays in use, and goes when none does', async () => {
    const { browser } = await browserOf('operator')
    const used = await makeList(parts, 'Used', [])
    await makeLimit(parts, { steps: [{ afterSeconds: 0, listIds: [used] }] })
    expect((await browser.delete(`/api/lists/${used}`).set('If-Match', '"1"').expect(409)).body.code).toBe('list.inUse')
    const free = await makeList(parts, 'Free', [])
    await browser.delete(`/api/lists/${free}`).set('If-Match', '"1"').expect(204)
    const names = (await browser.get('/api/lists').expect(200)).body.lists.map((list: { name: string }) => list.name)
    expect(names).toContain('Used')
    expect(names).not.toContain('Free')
  })

  test('for safety lets nobody leave by themselves, any other does', async () => {
    const { browser, person } = await browserOf('partner')
    const safety = await makeList(parts, 'Beach patrol', [person.id], true)
    const other = await makeList(parts, 'News', [person.id])
    expect((await browser.delete(`/api/profile/lists/${safety}`).expect(403)).body.code).toBe('list.needsOperator')
    await browser.delete(`/api/profile/lists/${other}`).expect(204)
    const profile = await browser.get('/api/profile').expect(200)
    expect(profile.body.lists.map((list: { name: string }) => list.name)).toEqual(['Beach patrol'])
  })
})

describe('people who get e-mails', () => {
  test('a partner sets own hours, deputy and absences, and nothing else of themselves', async () => {
    const { browser, person } = await browserOf('partner')
    const deputy = await makePerson(parts.clock, { role: null })
    const own = {
      hours: { from: '22:00', to: '06:00', days: [5, 6] },
      deputyId: deputy.id,
      absences: [{ startsAt: '2026-12-24T00:00:00Z', endsAt: '2026-12-27T00:00:00Z' }],
    }
    const answer = await browser.put('/api/profile').set('If-Match', '"1"').send(own).expect(200)
    expect(answer.body).toMatchObject({ hours: own.hours, deputy: { id: deputy.id }, version: 2 })
    expect(answer.body.absences).toHaveLength(1)
    await browser
      .put('/api/profile')
      .set('If-Match', '"2"')
      .send({ ...own, name: 'Other' })
      .expect(422)
    const self = await browser
      .put('/api/profile')
      .set('If-Match', '"2"')
      .send({ ...own, deputyId: person.id })
    expect(self.body.errors).toEqual([{ path: 'deputyId', message: 'must be somebody else' }])
    const turned = { ...own, absences: [{ startsAt: '2026-12-27T00:00:00Z', endsAt: '2026-12-24T00:00:00Z' }] }
    await browser.put('/api/profile').set('If-Match', '"2"').send(turned).expect(422)
  })

  test('the watch enters hours, deputy and absence for somebody else, and nothing else of them', async () => {
    const { browser } = await browserOf('operator')
    const [ill, deputy] = [await makePerson(parts.clock, { role: null }), await makePerson(parts.clock)]
    const side = {
      hours: null,
      deputyId: deputy.id,
      absences: [{ startsAt: '2026-12-01T00:00:00Z', endsAt: '2026-12-08T00:00:00Z' }],
    }
    const put = (by: typeof browser, version: number, body: object = side) =>
      by.put(`/api/people/${ill.id}/mailSide`).set('If-Match', `"${version}"`).send(body)
    const { body } = await put(browser, 1).expect(200)
    expect(body).toMatchObject({ name: ill.name, deputy: { name: deputy.name }, version: 2 })
    await put(browser, 1).expect(412)
    await put(browser, 2, { ...side, email: 'other@harbour.example' }).expect(422)
    await put((await browserOf('partner')).browser, 2).expect(403)
    await put((await browserOf('admin')).browser, 2, { ...side, absences: [] }).expect(200)
    const audit = await Audit.findOne({ where: { action: 'person.changeMail', entityId: String(ill.id) } })
    expect(audit?.after).toMatchObject({ deputyId: deputy.id })
  })

  test('a partner is offered names for a deputy, without addresses, and not their own', async () => {
    const { browser, person } = await browserOf('partner')
    const { people } = (await browser.get('/api/profile/deputies').expect(200)).body
    expect(people.length).toBeGreaterThan(0)
    expect(people.map(({ id }: { id: number }) => id)).not.toContain(person.id)
    expect(Object.keys(people[0])).toEqual(['id', 'name'])
  })

  test('somebody without a role is added by an administrator, once for each address, and cannot sign in', async () => {
    const { browser } = await browserOf('admin')
    const draft = { name: 'Works team', email: 'Works@harbour.example', team: 'harbour' }
    const { body } = await browser.post('/api/people').send(draft).expect(201)
    expect(body).toMatchObject({ email: 'works@harbour.example', role: null, mailHealth: 'unknown' })
    await browser
      .post('/api/people')
      .send({ ...draft, email: 'WORKS@harbour.example' })
      .expect(422)
    await browser
      .post('/api/people')
      .send({ ...draft, name: 'A\r\nBcc: x@y.example' })
      .expect(422)
    const operator = await browserOf('operator')
    await operator.browser.post('/api/people').send(draft).expect(403)
  })

  test('an operator has a test e-mail written to one of them, and tries a refused one again', async () => {
    const { browser, person } = await browserOf('operator')
    const { body } = await browser.post('/api/messages/test').send({ personId: person.id }).expect(201)
    expect(body).toMatchObject({ kind: 'test', alertId: null, subject: 'Test e-mail of Harbour' })
    const delivery = await Delivery.findOne({ where: { messageId: body.id }, rejectOnEmpty: true })
    await browser.post(`/api/deliveries/${delivery.id}/retry`).expect(409)
    await delivery.update({ state: 'refused', nextAttemptAt: null })
    const again = await browser.post(`/api/deliveries/${delivery.id}/retry`).expect(200)
    expect(again.body.deliveries).toMatchObject([{ state: 'queued', person: { id: person.id } }])
    const list = await browser.get('/api/messages').expect(200)
    expect(list.body.messages[0].id).toBe(await Message.max('id'))
  })

  test('those that are not out for somebody are listed apart, as the alert line counts them', async () => {
    const { browser } = await browserOf('operator')
    const person = await makePerson(parts.clock, { role: null })
    const messageOf = async (state: 'queued' | 'refused' | 'givenUp' | 'accepted', attempts: number, hoursAgo = 0) => {
      const createdAt = new Date(parts.clock.now().getTime() - hoursAgo * 3_600_000)
      const { id } = await Message.create({ kind: 'test', subject: 'Test', text: 'Test', isExercise: false, createdAt, queuedAt: createdAt }) // prettier-ignore
      const header = `<${id}@harbour.example>`
      const to = { messageId: id, personId: person.id, address: 'x@y.example', messageIdHeader: header, createdAt }
      await Delivery.create({ ...to, state, attempts })
      return id
    }
    const wanted = [await messageOf('queued', 3), await messageOf('refused', 1), await messageOf('givenUp', 9)]
    await messageOf('queued', 0)
    await messageOf('accepted', 2)
    await messageOf('refused', 1, 25)
    const { body } = await browser.get('/api/messages?show=notOut').expect(200)
    const listed = body.messages.map(({ id }: { id: number }) => id)
    for (const id of wanted) expect(listed).toContain(id)
    const { messagesNotOut } = (await browser.get('/api/alerts').expect(200)).body
    expect(messagesNotOut.count).toBe(listed.length)
  })

  test('in real use there are no caught e-mails', async () => {
    const { browser } = await browserOf('admin')
    await browser.get('/api/caughtMails').expect(404)
  })
})

import bcrypt from 'bcryptjs'
import type { Express } from 'express'
import request from 'supertest'
import { beforeAll, describe, expect, test, vi } from 'vitest'
import { createApp } from '../../server/app.ts'
import { Audit, Session } from '../../server/models/index.ts'
import { changeAccount, setDisabled } from '../../server/services/people/accounts.ts'
import { forgetOldSessions } from '../../server/services/sessions.ts'
import { usualPreferences } from '../../shared/schemas/preferences.ts'
import { openBrowser, signedIn } from '../support/browser.ts'
import { makePerson, usualPassword } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let app: Express
beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
})

const hour = 3600

describe('signing in', () => {
  test('with e-mail and password gives the person, and a cookie that scripts cannot read', async () => {
    const person = await makePerson(parts.clock, { role: 'operator' })
    const answer = await openBrowser(app)
      .post('/api/session')
      .send({ email: person.email, password: usualPassword })
      .expect(200)
    expect(answer.body).toEqual({
      person: {
        id: person.id,
        name: person.name,
        email: person.email,
        role: 'operator',
        team: null,
        timeZone: 'Etc/UTC',
      },
      preferences: usualPreferences,
      mustEnrol: false,
      readOnly: false,
      absoluteUntil: '2026-12-02T06:00:00.000Z',
      serverTime: '2026-12-01T06:00:00.000Z',
    })
    expect(answer.get('Set-Cookie')?.[0]).toMatch(/^offing_session=ey[^;]+; Path=\/; HttpOnly; SameSite=Lax$/)
  })

  test('with the name of the account, whatever its case, is the same', async () => {
    await makePerson(parts.clock, { name: 'Duty officer C-3' })
    await signedIn(app, 'duty OFFICER c-3')
  })

  test('with a name that two accounts bear is refused', async () => {
    await makePerson(parts.clock, { name: 'Twin' })
    await makePerson(parts.clock, { name: 'Twin' })
    await openBrowser(app).post('/api/session').send({ email: 'Twin', password: usualPassword }).expect(401)
  })

  test('with a wrong password and with an unknown account gives one and the same answer', async () => {
    const person = await makePerson(parts.clock)
    const answers = await Promise.all(
      [person.email, 'nobody@harbour.example'].map((email) =>
        openBrowser(app).post('/api/session').send({ email, password: 'wrong wrong wrong' }).expect(401),
      ),
    )
    const bodies = answers.map(({ body }) => ({ ...body, instance: '' }))
    expect(bodies[0]).toEqual(bodies[1])
    expect(bodies[0].code).toBe('session.wrongPassword')
  })

  test('is refused to a person without a role, to a disabled one, and past the 72 bytes that bcrypt reads', async () => {
    const password = 'p'.repeat(36) + 'q'.repeat(36)
    const withoutRole = await makePerson(parts.clock, { role: null })
    const disabled = await makePerson(parts.clock)
    const long = await makePerson(parts.clock, { password })
    await setDisabled(parts, disabled.id, 1, true, null)
    for (const email of [withoutRole.email, disabled.email]) {
      await openBrowser(app).post('/api/session').send({ email, password: usualPassword }).expect(401)
    }
    await signedIn(app, long.email, password)
    await openBrowser(app)
      .post('/api/session')
      .send({ email: long.email, password: `${password}more` })
      .expect(401)
  })

  test('costs one comparison of the same cost, whether the account exists or not', async () => {
    const person = await makePerson(parts.clock)
    const compare = vi.spyOn(bcrypt, 'compare')
    for (const email of [person.email, 'nobody.at.all@harbour.example']) {
      await openBrowser(app).post('/api/session').send({ email, password: 'wrong wrong wrong' }).expect(401)
    }
    expect(compare.mock.calls.map(([, hash]) => bcrypt.getRounds(hash))).toEqual([4, 4])
    compare.mockRestore()
  })

  test('is audited, and neither password nor token stands in the log', async () => {
    const person = await makePerson(parts.clock)
    const browser = await signedIn(app, person.email)
    await browser.get('/api/session').expect(200)
    const rows = await Audit.findAll({ where: { entity: 'person', entityId: String(person.id) } })
    expect(rows.map((row) => row.action)).toEqual(['session.begin'])
    expect(parts.log.map((line) => JSON.parse(line).personId)).toContain(person.id)
    expect(parts.log.join()).not.toContain(usualPassword)
    expect(parts.log.join()).not.toMatch(/eyJ[\w-]+\./)
  })
})

describe('a session', () => {
  test('is over at once when the person signs out, also for a copy of the cookie', async () => {
    const person = await makePerson(parts.clock)
    const answer = await openBrowser(app).post('/api/session').send({ email: person.email, password: usualPassword })
    const cookie = answer.get('Set-Cookie')?.[0]?.split(';')[0] ?? ''
    const withCopy = () => request(app).get('/api/session').set('Cookie', cookie)
    await withCopy().expect(200)
    await request(app).delete('/api/session').set('Cookie', cookie).set('X-Offing', '1').expect(204)
    expect((await withCopy().expect(401)).body.code).toBe('session.none')
    const session = await Session.findOne({ where: { personId: person.id } })
    expect(parts.news).toContainEqual({ topic: 'session.ended', news: { sessionId: session?.id } })
  })

  test('is over at once when the person is disabled', async () => {
    const person = await makePerson(parts.clock)
    const browser = await signedIn(app, person.email)
    await setDisabled(parts, person.id, 1, true, null)
    await browser.get('/api/session').expect(401)
    expect(parts.news).toContainEqual({ topic: 'person.changed', news: { personId: person.id } })
  })

  test('has the new role at once', async () => {
    const person = await makePerson(parts.clock, { role: 'admin' })
    const browser = await signedIn(app, person.email)
    await browser.post('/api/jobs/9999/cancel').expect(404)
    await makePerson(parts.clock, { role: 'admin' })
    const { name, email, team, timeZone } = person
    await changeAccount(parts, person.id, 1, { name, email, team, timeZone, role: 'operator' }, null)
    expect((await browser.get('/api/session').expect(200)).body.person.role).toBe('operator')
    expect((await browser.post('/api/jobs/9999/cancel').expect(403)).body.code).toBe('access.notAllowed')
  })

  test('may only read after the absolute limit, and changes things again after signing in on the same page', async () => {
    const person = await makePerson(parts.clock, { role: 'admin' })
    const browser = await signedIn(app, person.email)
    const before = await Session.findOne({ where: { personId: person.id } })
    for (let hours = 0; hours < 25; hours += 5) {
      parts.clock.advance(5 * hour)
      await browser.get('/api/session').expect(200)
    }
    expect((await browser.get('/api/session')).body.readOnly).toBe(true)
    await browser.get('/api/jobs').expect(200)
    expect((await browser.post('/api/jobs/9999/cancel').expect(403)).body.code).toBe('session.readOnly')
    await browser.post('/api/session').send({ email: person.email, password: usualPassword }).expect(200)
    await browser.post('/api/jobs/9999/cancel').expect(404)
    const after = await Session.findAll({ where: { personId: person.id, endedAt: null } })
    expect(after.map((session) => session.id)).toEqual([before?.id])
  })

  test('renewed by signing in again leaves the older token worthless', async () => {
    const person = await makePerson(parts.clock)
    const browser = openBrowser(app)
    const credentials = { email: person.email, password: usualPassword }
    const first = await browser.post('/api/session').send(credentials).expect(200)
    await browser.post('/api/session').send(credentials).expect(200)
    const old = first.get('Set-Cookie')?.[0]?.split(';')[0] ?? ''
    await request(app).get('/api/session').set('Cookie', old).expect(401)
    await browser.get('/api/session').expect(200)
  })

  test('that nobody used for ninety days is forgotten, and no other', async () => {
    const old = await makePerson(parts.clock)
    await signedIn(app, old.email)
    parts.clock.advance(90 * 24 * hour + 1)
    const fresh = await makePerson(parts.clock)
    await signedIn(app, fresh.email)
    await forgetOldSessions(parts)
    expect(await Session.count({ where: { personId: old.id } })).toBe(0)
    expect(await Session.count({ where: { personId: fresh.id } })).toBe(1)
  })

  test('is over when another person signs in at the same browser', async () => {
    const [first, second] = [await makePerson(parts.clock), await makePerson(parts.clock)]
    const browser = await signedIn(app, first.email)
    await browser.post('/api/session').send({ email: second.email, password: usualPassword }).expect(200)
    expect((await browser.get('/api/session')).body.person.id).toBe(second.id)
    expect(await Session.count({ where: { personId: first.id, endedAt: null } })).toBe(0)
  })

  test('ends after twelve hours without a request', async () => {
    const person = await makePerson(parts.clock)
    const browser = await signedIn(app, person.email)
    parts.clock.advance(12 * hour)
    await browser.get('/api/session').expect(200)
    parts.clock.advance(12 * hour + 1)
    await browser.get('/api/session').expect(401)
  })
})

describe('guessing', () => {
  const wrong = (address: string, email: string | null) =>
    openBrowser(app)
      .post('/api/session')
      .set('X-Forwarded-For', address)
      .send({ email, password: 'not this one at all' })

  beforeAll(async () => {
    app = createApp({ ...parts, environment: { ...parts.environment, trustProxy: 1 } })
  })

  test('is slowed for the guesser with growing delays, and nobody else is held up', async () => {
    const person = await makePerson(parts.clock)
    for (let tries = 0; tries < 5; tries += 1) await wrong('192.0.2.1', person.email).expect(401)
    const refused = await wrong('192.0.2.1', person.email).expect(429)
    expect(refused.body.code).toBe('session.tooManyTries')
    expect(refused.get('Retry-After')).toBe('15')
    parts.clock.advance(16)
    await wrong('192.0.2.1', person.email).expect(401)
    expect((await wrong('192.0.2.1', person.email).expect(429)).get('Retry-After')).toBe('30')
    await openBrowser(app)
      .post('/api/session')
      .set('X-Forwarded-For', '192.0.2.2')
      .send({ email: person.email, password: usualPassword })
      .expect(200)
  })

  test('again and again for a quarter of an hour gets at most ten tries', async () => {
    const person = await makePerson(parts.clock)
    let tried = 0
    for (let second = 0; second < 900; second += 5) {
      if ((await wrong('192.0.2.7', person.email)).status === 401) tried += 1
      parts.clock.advance(5)
    }
    expect(tried).toBeLessThanOrEqual(10)
  })

  test('at many accounts from one address is slowed too', async () => {
    const statuses = []
    for (let tries = 0; tries < 31; tries += 1) statuses.push((await wrong('192.0.2.9', `a${tries}@x.example`)).status)
    expect(statuses.slice(0, 30).every((status) => status === 401)).toBe(true)
    expect(statuses[30]).toBe(429)
  })

  test('from many addresses leaves the desk where the person signed in before free', async () => {
    const person = await makePerson(parts.clock)
    const right = (address: string) =>
      openBrowser(app)
        .post('/api/session')
        .set('X-Forwarded-For', address)
        .send({ email: person.email, password: usualPassword })
    await right('198.51.100.1').expect(200)
    for (let tries = 0; tries < 60; tries += 1) await wrong(`203.0.113.${tries}`, person.email).expect(401)
    await wrong('203.0.113.99', person.email).expect(429)
    await right('198.51.100.1').expect(200)
  })
})

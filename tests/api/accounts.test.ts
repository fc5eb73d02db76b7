import type { Express } from 'express'
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import type { Written } from '../../server/mail/letter.ts'
import { Audit, LinkToken, Message, Session } from '../../server/models/index.ts'
import type { Person } from '../../server/models/index.ts'
import { openBrowser, signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson, usualPassword } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { until } from '../support/until.ts'

let parts: TestParts
let app: Express
let admin: Person
let browser: Browser
const sent: { to: string; written: Written }[] = []

beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
  admin = await makePerson(parts.clock, { role: 'admin', name: 'Technician' })
  browser = await signedIn(app, admin.email)
})

/** Sends what is queued and answers the newest link to this address. */
async function linkTo(address: string): Promise<string> {
  const transport = {
    send: async (written: Written, { to, beforeData }: { to: string; beforeData(): Promise<boolean> }) => {
      await beforeData()
      sent.push({ to, written })
      return { kind: 'accepted' as const, reply: '250 taken' }
    },
  }
  const mail = await startDeliverMail(parts, { isUntimed: true, transport })
  await mail.run()
  await mail.stop()
  const text = sent.filter(({ to }) => to === address).at(-1)?.written.text ?? ''
  return /\/welcome\/(\S+)/.exec(text)?.[1] ?? ''
}

const person = { team: null, timeZone: 'Atlantic/Azores' }
let made = 0
async function invited(role = 'operator') {
  made += 1
  const email = `new${made}@harbour.example`
  const { body } = await browser
    .post('/api/accounts')
    .send({ ...person, name: `New ${made}`, email, role })
    .expect(201)
  return { id: body.id as number, email, token: await linkTo(email) }
}

describe('an invitation', () => {
  test('goes by e-mail, lets the person choose a passphrase once, and then sign in', async () => {
    const { id, email, token } = await invited()
    const link = `/api/passphrase-links/${token}`
    const { body } = await openBrowser(app).get(link).expect(200)
    expect(body).toMatchObject({ kind: 'invitation', email, state: 'open' })
    const choose = (password: string) => openBrowser(app).post(link).send({ password })
    expect((await choose('password1234').expect(422)).body.errors[0].path).toBe('password')
    await choose('four slow barges turn').expect(204)
    expect((await choose('five slow barges turn').expect(410)).body.code).toBe('passphraseLink.ended')
    expect((await openBrowser(app).get(link).expect(200)).body.state).toBe('used')
    await signedIn(app, email, 'four slow barges turn')
    expect((await browser.get(`/api/accounts/${id}`).expect(200)).body).toMatchObject({
      state: 'active',
      hasPassphrase: true,
      signedInOn: 1,
      linkUntil: null,
    })
  })

  test('stands nowhere in the database or in the API as a link that works', async () => {
    const { token } = await invited()
    const messages = await Message.findAll()
    expect(JSON.stringify(messages)).not.toContain(token)
    expect(JSON.stringify(await LinkToken.findAll())).not.toContain(token)
    expect(JSON.stringify(await Audit.findAll())).not.toContain(token)
    expect(parts.log.join()).not.toContain(token)
  })

  test('ends after seven days, and a newer one ends the older', async () => {
    const { id, email, token } = await invited()
    await browser.post(`/api/accounts/${id}/link`).expect(200)
    const newer = await linkTo(email)
    expect((await openBrowser(app).get(`/api/passphrase-links/${token}`).expect(200)).body.state).toBe('ended')
    expect((await openBrowser(app).get(`/api/passphrase-links/${newer}`).expect(200)).body.state).toBe('open')
    parts.clock.advance(7 * 24 * 3600 + 1)
    browser = await signedIn(app, admin.email)
    expect((await openBrowser(app).get(`/api/passphrase-links/${newer}`).expect(200)).body.state).toBe('ended')
    expect((await browser.get(`/api/accounts/${id}`).expect(200)).body.state).toBe('linkEnded')
  })

  test('altered by one sign leads to nothing, and an address that is known is refused', async () => {
    const { token, email } = await invited()
    await openBrowser(app)
      .get(`/api/passphrase-links/${token.slice(0, -1)}-`)
      .expect(404)
    const twice = { ...person, name: 'Twice', email: email.toUpperCase(), role: 'partner' }
    expect((await browser.post('/api/accounts').send(twice).expect(422)).body.errors[0].path).toBe('email')
    const nowhere = { ...person, name: 'Nowhere', email: 'n@harbour.example', role: 'partner', timeZone: 'Mars/Base' }
    expect((await browser.post('/api/accounts').send(nowhere).expect(422)).body.errors[0].path).toBe('timeZone')
  })
})

describe('a link asked for at the sign-in page', () => {
  const ask = (email: string) => openBrowser(app).post('/api/passphrase-links').send({ email })

  test('is answered alike for every address, and goes only to somebody who may sign in', async () => {
    const known = await makePerson(parts.clock)
    const mailOnly = await makePerson(parts.clock, { role: null })
    const answers = []
    for (const email of [known.email, mailOnly.email, 'nobody.at.all@harbour.example']) {
      answers.push(await ask(email ?? ''))
    }
    expect(answers.map(({ status, text }) => [status, text])).toEqual(Array(3).fill([202, '']))
    await until('a link', async () => (await LinkToken.count({ where: { personId: known.id } })) === 1, 5_000)
    expect(await LinkToken.count({ where: { personId: mailOnly.id } })).toBe(0)
    const old = await signedIn(app, known.email)
    const token = await linkTo(known.email ?? '')
    await openBrowser(app).post(`/api/passphrase-links/${token}`).send({ password: 'six grey terns dive' }).expect(204)
    await old.get('/api/session').expect(401)
    await openBrowser(app).post('/api/session').send({ email: known.email, password: usualPassword }).expect(401)
    await signedIn(app, known.email, 'six grey terns dive')
  })

  test('is refused to an address of the network that asks again and again', async () => {
    const statuses = []
    for (let times = 0; times < 5; times += 1) statuses.push((await ask(`x${times}@harbour.example`)).status)
    expect(statuses.at(-1)).toBe(429)
  })
})

describe('an account', () => {
  const changed = (one: Person, role: string | null) => ({
    ...{ name: one.name, email: one.email, team: one.team, timeZone: one.timeZone, role },
  })

  test('has its new role at once, and the slower of two administrators is shown the other’s change', async () => {
    const one = await makePerson(parts.clock)
    const own = await signedIn(app, one.email)
    const path = `/api/accounts/${one.id}`
    await browser.put(path).send(changed(one, 'partner')).expect(428)
    await browser.put(path).set('If-Match', '"1"').send(changed(one, 'partner')).expect(200)
    expect((await own.get('/api/session').expect(200)).body.person.role).toBe('partner')
    const late = await browser.put(path).set('If-Match', '"1"').send(changed(one, 'admin')).expect(412)
    expect(late.body).toMatchObject({ code: 'person.changedMeanwhile', current: { role: 'partner', version: 2 } })
    await browser.put(path).set('If-Match', '"2"').send(changed(one, null)).expect(200)
    await own.get('/api/session').expect(401)
    const audits = await Audit.findAll({ where: { entityId: String(one.id), action: 'person.change' } })
    expect(audits.map(({ before, after }) => [before, after])).toMatchObject([
      [{ role: 'operator' }, { role: 'partner' }],
      [{ role: 'partner' }, { role: null }],
    ])
  })

  test('of the last administrator is neither disabled nor given another role, and nobody disables themselves', async () => {
    const own = `/api/accounts/${admin.id}`
    const refused = await browser.put(own).set('If-Match', '"1"').send(changed(admin, 'operator')).expect(409)
    expect(refused.body.code).toBe('person.lastAdministrator')
    expect((await browser.post(`${own}/disable`).set('If-Match', '"1"').expect(409)).body.code).toBe('person.oneself')
    const second = await makePerson(parts.clock, { role: 'admin' })
    const other = await signedIn(app, second.email)
    await browser.post(`/api/accounts/${second.id}/disable`).set('If-Match', '"1"').expect(200)
    await other.get('/api/session').expect(401)
    await browser.post(`/api/accounts/${second.id}/enable`).set('If-Match', '"2"').expect(200)
    await signedIn(app, second.email)
    await browser.post(`/api/accounts/${second.id}/disable`).set('If-Match', '"3"').expect(200)
  })

  test('is signed out on one device or everywhere, by its person and by an administrator', async () => {
    const one = await makePerson(parts.clock)
    const [here, there, yonder] = [
      await signedIn(app, one.email),
      await signedIn(app, one.email),
      await signedIn(app, one.email),
    ]
    const { sessions } = (await here.get('/api/profile/sessions').expect(200)).body
    expect(sessions).toHaveLength(3)
    const theirs: { id: string; isThis: boolean }[] = (await there.get('/api/profile/sessions')).body.sessions
    await here.delete(`/api/profile/sessions/${theirs.find(({ isThis }) => isThis)?.id}`).expect(204)
    await there.get('/api/session').expect(401)
    await here.delete('/api/profile/sessions').expect(204)
    await yonder.get('/api/session').expect(401)
    await here.get('/api/session').expect(200)
    await browser.delete(`/api/accounts/${one.id}/sessions`).expect(200)
    await here.get('/api/session').expect(401)
    const stranger = await Session.findOne({ where: { personId: admin.id, endedAt: null } })
    const again = await signedIn(app, one.email)
    await again.delete(`/api/profile/sessions/${stranger?.id}`).expect(404)
  })

  test('has its own preferences and passphrase, which sign out everywhere else', async () => {
    const one = await makePerson(parts.clock)
    const here = await signedIn(app, one.email)
    const there = await signedIn(app, one.email)
    const { body } = await here.patch('/api/profile/preferences').send({ heightUnit: 'ft', textSize: 150 }).expect(200)
    expect(body).toMatchObject({ heightUnit: 'ft', speedUnit: 'm/s', textSize: 150 })
    await here.patch('/api/profile/preferences').send({ besideUtc: 'Nowhere/Here' }).expect(422)
    expect((await there.get('/api/session').expect(200)).body.preferences.heightUnit).toBe('ft')
    const wrong = { current: 'not this one at all', next: 'eight blue tugs wait' }
    expect((await here.put('/api/profile/passphrase').send(wrong).expect(422)).body.errors[0].path).toBe('current')
    await here
      .put('/api/profile/passphrase')
      .send({ ...wrong, current: usualPassword })
      .expect(204)
    await there.get('/api/session').expect(401)
    await here.get('/api/session').expect(200)
    await signedIn(app, one.email, 'eight blue tugs wait')
  })
})

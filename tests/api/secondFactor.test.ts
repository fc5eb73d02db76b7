import type { Express } from 'express'
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { Audit, Person, RecoveryCode } from '../../server/models/index.ts'
import { codeAt } from '../../server/services/secondFactor/timedCode.ts'
import { changeSetting } from '../../server/services/settings.ts'
import { inTransaction } from '../../server/services/transaction.ts'
import type { Role } from '../../shared/schemas/session.ts'
import { openBrowser, signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson, usualPassword } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

const path = '/api/profile/second-factor'
let parts: TestParts
let app: Express

beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
})

async function enrolled(role: Role = 'admin') {
  const person = await makePerson(parts.clock, { role })
  const browser = await signedIn(app, person.email)
  const offer = await browser.post(path).send({ password: usualPassword }).expect(200)
  const secret: string = offer.body.secret
  const confirmed = await browser
    .put(path)
    .send({ code: code(secret) })
    .expect(200)
  return { person, browser, secret, codes: confirmed.body.codes as string[], offer: offer.body }
}
const code = (secret: string): string => codeAt(secret, parts.clock.now())
const enter = (email: string | null, extra: object, browser: Browser = openBrowser(app)) =>
  browser.post('/api/session').send({ email, password: usualPassword, ...extra })

describe('a second factor', () => {
  test('is asked for at the door once it was set up, with a code that is good once', async () => {
    const { person, secret, offer } = await enrolled()
    expect(offer.uri).toContain(`secret=${secret}`)
    expect(offer.path.length).toBeGreaterThan(1000)
    expect((await enter(person.email, {}).expect(401)).body.code).toBe('session.codeNeeded')
    expect((await enter(person.email, { code: '000000' }).expect(401)).body.code).toBe('session.wrongCode')
    // The code that set it up was taken then.
    expect((await enter(person.email, { code: code(secret) }).expect(401)).body.code).toBe('session.wrongCode')
    parts.clock.advance(30)
    const now = code(secret)
    await enter(person.email, { code: now }).expect(200)
    await enter(person.email, { code: now }).expect(401)
    const wrong = await openBrowser(app).post('/api/session').send({ email: person.email, password: 'wrong wrong' })
    expect(wrong.body.code).toBe('session.wrongPassword')
  })

  test('is replaced once by each recovery code, however it is typed', async () => {
    const { person, codes } = await enrolled()
    expect(codes).toHaveLength(10)
    expect(new Set(codes).size).toBe(10)
    const typed = ` ${codes[0]?.toUpperCase().replaceAll('-', ' ')} `
    const inside = openBrowser(app)
    await enter(person.email, { code: typed }, inside).expect(200)
    expect((await inside.get(path).expect(200)).body).toMatchObject({ isEnrolled: true, recoveryCodesLeft: 9 })
    expect((await enter(person.email, { code: codes[0] }).expect(401)).body.code).toBe('session.wrongCode')
    const rows = await RecoveryCode.findAll({ where: { personId: person.id } })
    expect(JSON.stringify(rows)).not.toContain(codes[1])
    const audits = await Audit.findAll({ where: { entityId: String(person.id) } })
    expect(audits.map(({ action }) => action)).toContain('secondFactor.useRecoveryCode')
  })

  test('is not to be had without the passphrase, nor in force without a code of it', async () => {
    const person = await makePerson(parts.clock)
    const browser = await signedIn(app, person.email)
    await browser.post(path).send({ password: 'not the passphrase' }).expect(422)
    await browser.put(path).send({ code: '123456' }).expect(422)
    await browser.post(path).send({ password: usualPassword }).expect(200)
    await browser.put(path).send({ code: 'seven' }).expect(422)
    await enter(person.email, {}).expect(200)
  })

  test('is guessed at no faster than a passphrase', async () => {
    const { person } = await enrolled()
    const statuses: number[] = []
    for (let times = 0; times < 8; times += 1) {
      statuses.push((await enter(person.email, { code: `00000${times}` })).status)
    }
    expect(statuses.at(-1)).toBe(429)
  })

  test('lies sealed in the database', async () => {
    const { person, secret } = await enrolled()
    const row = await Person.findByPk(person.id)
    expect(row?.totpSecret).not.toContain(secret)
  })

  test('is reset by another administrator, not by oneself, and removed by oneself with a code', async () => {
    const { person, browser } = await enrolled()
    const other = await makePerson(parts.clock, { role: 'admin' })
    const theirs = await signedIn(app, other.email)
    const own = await browser.delete(`/api/accounts/${person.id}/second-factor`).expect(409)
    expect(own.body.code).toBe('secondFactor.notByOneself')
    const reset = await theirs.delete(`/api/accounts/${person.id}/second-factor`).expect(200)
    expect(reset.body.hasSecondFactor).toBe(false)
    await enter(person.email, {}).expect(200)
    const again = await enrolled('operator')
    parts.clock.advance(30)
    await again.browser
      .delete(path)
      .send({ code: code(again.secret) })
      .expect(204)
    await enter(again.person.email, {}).expect(200)
  })
})

describe('where administrators must have one', () => {
  test('one without is let in to set it up and to nothing else; operators are not asked', async () => {
    const administrator = await makePerson(parts.clock, { role: 'admin' })
    const browser = await signedIn(app, administrator.email)
    const by = { personId: administrator.id, reason: 'Rule of the board' }
    await inTransaction(parts.sequelize, (transaction) =>
      changeSetting(parts, 'people', { administratorsNeedSecondFactor: true }, by, transaction),
    )
    expect((await browser.get('/api/session').expect(200)).body.mustEnrol).toBe(true)
    expect((await browser.get('/api/stations').expect(403)).body.code).toBe('session.secondFactorNeeded')
    const { body } = await browser.post(path).send({ password: usualPassword }).expect(200)
    await browser
      .put(path)
      .send({ code: code(body.secret) })
      .expect(200)
    expect((await browser.get('/api/session').expect(200)).body.mustEnrol).toBe(false)
    await browser.get('/api/stations').expect(200)
    parts.clock.advance(30)
    const kept = await browser
      .delete(path)
      .send({ code: code(body.secret) })
      .expect(409)
    expect(kept.body.code).toBe('secondFactor.required')
    const operator = await makePerson(parts.clock, { role: 'operator' })
    await (await signedIn(app, operator.email)).get('/api/stations').expect(200)
  })
})

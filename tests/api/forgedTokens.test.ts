import type { Express } from 'express'
import jwt from 'jsonwebtoken'
import type { SignOptions } from 'jsonwebtoken'
import request from 'supertest'
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { Session } from '../../server/models/index.ts'
import { openBrowser } from '../support/browser.ts'
import { makePerson, usualPassword } from '../support/factories.ts'
import { testParts, testSecret } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let app: Express
let genuine: string
let claims: Record<string, unknown>
let otherPersonId: number

beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
  const person = await makePerson(parts.clock)
  otherPersonId = (await makePerson(parts.clock, { role: 'admin' })).id
  const answer = await openBrowser(app).post('/api/session').send({ email: person.email, password: usualPassword })
  genuine = answer.get('Set-Cookie')?.[0]?.split(';')[0]?.split('=')[1] ?? ''
  const decoded = jwt.decode(genuine)
  if (decoded === null || typeof decoded === 'string') throw new Error('no token')
  claims = decoded
})

const ask = (token: string) => request(app).get('/api/session').set('Cookie', `offing_session=${token}`)
const signed = (changed: Record<string, unknown>, secret = testSecret, options: SignOptions = {}): string =>
  jwt.sign({ ...claims, ...changed }, secret, options)
const without = (name: string): string => {
  const { [name]: _left, ...rest } = claims
  return jwt.sign(rest, testSecret)
}
const base64 = (value: unknown): string => Buffer.from(JSON.stringify(value)).toString('base64url')
const now = (): number => parts.clock.now().getTime() / 1000

describe('a token', () => {
  test('as the server gave it, and one signed alike, are taken', async () => {
    await ask(genuine).expect(200)
    await ask(signed({})).expect(200)
  })

  const forgeries: [string, () => string][] = [
    ['without a signature', () => jwt.sign(claims, '', { algorithm: 'none' })],
    ['with its signature cut off', () => genuine.replace(/\.[^.]*$/, '.')],
    ['with HS512', () => signed({}, testSecret, { algorithm: 'HS512' })],
    ['with HS384', () => signed({}, testSecret, { algorithm: 'HS384' })],
    ['of another secret', () => signed({}, 'another secret that is long enough to be one')],
    ['of an empty secret', () => `${base64({ alg: 'HS256', typ: 'JWT' })}.${base64(claims)}.${base64('')}`],
    ['for another audience', () => signed({ aud: 'offing.telemetry' })],
    ['without an audience', () => without('aud')],
    ['of another issuer', () => signed({ iss: 'elsewhere' })],
    ['without an issuer', () => without('iss')],
    ['past its time', () => signed({ exp: now() - 1 })],
    ['before its time', () => signed({ nbf: now() + 60 })],
    ['of another kind', () => signed({ typ: 'receipt' })],
    ['without a kind', () => without('typ')],
    ['without a session', () => without('sid')],
    ['of a session that does not exist', () => signed({ sid: 'A'.repeat(43) })],
    ['with another number than the session gave', () => signed({ jti: 'A'.repeat(43) })],
    ['without its number', () => without('jti')],
    ['of another person', () => signed({ sub: String(otherPersonId) })],
    ['of a person who is no number', () => signed({ sub: "1' OR '1'='1" })],
    ['that is empty', () => ''],
    ['that is noise', () => 'x.y.z'],
    ['that is very long', () => `${'a'.repeat(4000)}.b.c`],
  ]
  test.each(forgeries)('%s is refused', async (_circumstance, forge) => {
    const { body } = await ask(forge()).expect(401)
    expect(body.code).toBe('session.none')
  })

  test('edited at any place is refused', async () => {
    const { iat: _issued, ...editable } = claims
    for (const name of Object.keys(editable)) {
      const [head, , seal] = genuine.split('.')
      await ask(`${head}.${base64({ ...claims, [name]: `${String(claims[name])}1` })}.${seal}`).expect(401)
    }
    for (let place = 0; place < genuine.length - 1; place += 7) {
      const other = genuine[place] === 'A' ? 'B' : 'A'
      await ask(genuine.slice(0, place) + other + genuine.slice(place + 1)).expect(401)
    }
  })

  test('of an ended session is refused', async () => {
    await Session.update({ endedAt: parts.clock.now() }, { where: {} })
    await ask(genuine).expect(401)
  })
})

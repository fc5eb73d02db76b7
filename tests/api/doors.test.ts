import type { Express } from 'express'
import request from 'supertest'
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { problem } from '../../shared/schemas/problem.ts'
import { openBrowser, signedIn } from '../support/browser.ts'
import { makePerson, usualPassword } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let app: Express
let email: string | null
beforeAll(async () => {
  parts = await testParts({ PUBLIC_URL: 'http://127.0.0.1:8470' })
  app = createApp(parts)
  email = (await makePerson(parts.clock, { role: 'admin' })).email
})

describe('every answer', () => {
  test('carries the strict policy of what a page may load, and no word on what runs here', async () => {
    for (const path of ['/healthz', '/api/session', '/api/nothing', '/nothing.js']) {
      const { headers } = await request(app).get(path)
      expect(headers['content-security-policy']).toBe(
        "default-src 'self';script-src 'self';style-src 'self';style-src-attr 'none';img-src 'self' data:;" +
          "font-src 'self';connect-src 'self' ws://127.0.0.1:8470 ws://localhost:8470;" +
          "object-src 'none';base-uri 'none';form-action 'self';frame-ancestors 'none'",
      )
      expect(headers).toMatchObject({
        'x-content-type-options': 'nosniff',
        'x-frame-options': 'DENY',
        'referrer-policy': 'no-referrer',
        'cross-origin-opener-policy': 'same-origin',
        'cross-origin-resource-policy': 'same-origin',
      })
      expect(headers['x-powered-by']).toBeUndefined()
      expect(headers['strict-transport-security']).toBeUndefined()
    }
  })

  test('over https asks for https for a year, and binds the cookie to the host', async () => {
    const environment = { ...parts.environment, publicUrl: 'https://watch.harbour.example' }
    const secured = createApp({ ...parts, environment })
    const answer = await openBrowser(secured).post('/api/session').send({ email, password: usualPassword }).expect(200)
    expect(answer.get('Strict-Transport-Security')).toBe('max-age=31536000; includeSubDomains')
    expect(answer.get('Set-Cookie')?.[0]).toMatch(/^__Host-offing_session=.+; Path=\/; HttpOnly; Secure; SameSite=Lax$/)
    expect(answer.get('Content-Security-Policy')).toContain("connect-src 'self' wss://watch.harbour.example;")
  })
})

describe('a change from elsewhere', () => {
  const change = () => request(app).post('/api/session').send({ email, password: usualPassword })

  test.each([
    ['without the header of our pages', {}],
    ['with the origin of another site', { 'X-Offing': '1', Origin: 'https://elsewhere.example' }],
    ['with our host on another port', { 'X-Offing': '1', Origin: 'http://127.0.0.1:9999' }],
    ['with an opaque origin', { 'X-Offing': '1', Origin: 'null' }],
    ["that the browser says is another site's", { 'X-Offing': '1', 'Sec-Fetch-Site': 'cross-site' }],
    ['from another host of the same site', { 'X-Offing': '1', 'Sec-Fetch-Site': 'same-site' }],
  ])('%s is refused', async (_circumstance, headers) => {
    const { body } = await change().set(headers).expect(403)
    expect(body.code).toBe('request.foreignOrigin')
  })

  test('is taken from our own page under each of its names', async () => {
    for (const Origin of ['http://127.0.0.1:8470', 'http://localhost:8470']) {
      await change().set({ 'X-Offing': '1', 'Sec-Fetch-Site': 'same-origin', Origin }).expect(200)
    }
  })

  test('as a form or as text is refused before it is read', async () => {
    const asForm = await request(app).post('/api/session').set('X-Offing', '1').type('form').send({ email }).expect(415)
    expect(asForm.body.code).toBe('request.unsupportedType')
    await request(app).post('/api/session').set('X-Offing', '1').type('text').send('{"email":"x"}').expect(415)
  })
})

describe('a problem', () => {
  const post = (body: string | object) => openBrowser(app).post('/api/session').type('json').send(body)

  test.each([
    ['of an input that does not fit', () => post({ email: '' }), 422, 'request.invalid'],
    ['of a field that is not asked for', () => post({ email, password: 'x', role: 'admin' }), 422, 'request.invalid'],
    ['of JSON that cannot be read', () => post('{"email":'), 400, 'request.malformed'],
    ['of a body that is too large', () => post({ email: 'x'.repeat(300_000) }), 413, 'request.tooLarge'],
    ['of an unknown path', () => request(app).get('/api/ships'), 404, 'request.unknownPath'],
    ['of somebody who is not signed in', () => request(app).get('/api/jobs'), 401, 'session.none'],
  ])('%s has its shape, its code and a number to ask by', async (_circumstance, ask, status, code) => {
    const answer = await ask()
    expect(answer.status).toBe(status)
    expect(answer.get('Content-Type')).toBe('application/problem+json; charset=utf-8')
    expect(problem.parse(answer.body)).toMatchObject({ status, code, type: `urn:offing:problem:${code}` })
    expect(answer.body.instance).toMatch(/^urn:offing:request:[0-9a-f-]{36}$/)
  })

  test('of an input names each field that is at fault', async () => {
    const { body } = await post({ email: '' }).expect(422)
    expect(body.errors.map((error: { path: string }) => error.path)).toEqual(['email', 'password'])
  })

  test('that nobody foresaw says nothing of its cause, which is in the log', async () => {
    const clock = {
      ...parts.clock,
      now: () => {
        throw new Error('the canary of the inside')
      },
    }
    const broken = createApp({ ...parts, clock })
    const answer = await request(broken).get('/api/installation').expect(500)
    expect(answer.body.code).toBe('server.fault')
    expect(JSON.stringify(answer.body)).not.toContain('canary')
    expect(parts.log.join()).toContain('the canary of the inside')
  })

  test('of parameters in the path names the parameter', async () => {
    const browser = await signedIn(app, email)
    const { body } = await browser.get('/api/jobs/0x1').expect(422)
    expect(body.errors).toEqual([{ path: 'params.jobId', message: 'must be a whole number' }])
  })
})

test('health says alive without the database, readiness asks it', async () => {
  await request(app).get('/healthz').expect(200, { alive: true })
  await request(app).get('/readyz').expect(200, { ready: true, reasons: [] })
})

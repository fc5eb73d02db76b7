import type { Express } from 'express'
import { afterEach, beforeAll, beforeEach, describe, expect, test } from 'vitest'
import request from 'supertest'
import { createApp } from '../../server/app.ts'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import type { DeliverMail } from '../../server/jobs/deliverMail.ts'
import { createTransport } from '../../server/mail/transport.ts'
import { AlertEvent, Audit, Delivery, Escalation, LinkToken, LogEntry } from '../../server/models/index.ts'
import type { Person } from '../../server/models/index.ts'
import type { ReceiptView } from '../../shared/schemas/message.ts'
import { makeLimit, makeList, raiseAlert } from '../support/alerts.ts'
import { openBrowser, signedIn } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
import { startTestMailServer } from '../support/mailCatcher.ts'
import type { TestMailServer } from '../support/mailCatcher.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

type ReceiptAlert = ReceiptView['alert']

let parts: TestParts
let app: Express
let server: TestMailServer
let mail: DeliverMail

beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
})

beforeEach(async () => {
  parts.clock.advance(3600)
  server = await startTestMailServer()
  const transport = createTransport({ url: server.url, from: 'watch@harbour.example', clientName: 'localhost' })
  mail = await startDeliverMail(parts, { isUntimed: true, transport })
})

afterEach(async () => {
  await mail.stop()
  await server.stop()
})

const tokensTo = ({ email }: Person): string[] =>
  server.caught.filter(({ to }) => to === email).map((one) => /receipt\/([\w.-]+)/.exec(one.mail.text ?? '')?.[1] ?? '')

async function told(count = 1) {
  const people = await Promise.all(Array.from({ length: count }, () => makePerson(parts.clock, { role: null })))
  const listId = await makeList(parts, 'Pilots', people.map(({ id }) => id)) // prettier-ignore
  const steps = [{ afterSeconds: 0, listIds: [listId] }]
  const version = await makeLimit(parts, { steps, remindEverySeconds: 600 })
  const alert = await raiseAlert(parts, version)
  await mail.run()
  return { people, alert, listId, token: tokensTo(people[0])[0] }
}

const everything = async () => ({
  deliveries: await Delivery.findAll({ order: [['id', 'ASC']], raw: true }),
  tokens: await LinkToken.findAll({ order: [['id', 'ASC']], raw: true }),
  steps: await Escalation.findAll({ order: [['alertId', 'ASC']], raw: true }),
  events: await AlertEvent.count(),
  audits: await Audit.count(),
  lines: await LogEntry.count(),
})

describe('the link in an e-mail', () => {
  test('opened any number of times, with GET and HEAD, by nobody signed in, shows the alert and changes nothing', async () => {
    const { token, alert, people } = await told()
    const before = await everything()
    for (let n = 0; n < 3; n += 1) {
      await request(app).head(`/api/receipts/${token}`).expect(200)
      const { body } = await request(app).get(`/api/receipts/${token}`).expect(200)
      expect(body).toMatchObject({
        person: people[0].name,
        isExpired: false,
        confirmedAt: null,
        content: { value: '2.61 m ± 0.14' },
        alert: { id: alert.id, stateWords: 'Active, not acknowledged', acknowledgedBy: null },
      })
    }
    expect(await everything()).toEqual(before)
  })

  test('is kept as a hash alone and stands nowhere in the log', async () => {
    const { token } = await told()
    await openBrowser(app).get(`/api/receipts/${token}`).expect(200)
    const rows = await LinkToken.findAll({ where: { kind: 'receipt' } })
    expect(rows.at(-1)?.tokenHash).toHaveLength(32)
    expect(JSON.stringify(rows)).not.toContain(token)
    expect(parts.log.some((line) => line.includes('/api/receipts/'))).toBe(true)
    expect(parts.log.join()).not.toContain(token)
  })

  test.each(['999', 'a.b.c', '1.zzzzzz.AAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAA'])(
    'that was made up (%s) leads nowhere',
    async (token) => {
      const browser = openBrowser(app)
      expect((await browser.get(`/api/receipts/${token}`).expect(404)).body.code).toBe('receipt.notFound')
      await browser.post(`/api/receipts/${token}`).expect(404)
    },
  )

  test('with another person put into it leads nowhere', async () => {
    const { token } = await told(2)
    const [, end, signature] = token.split('.')
    const other = (await Delivery.max<number, Delivery>('id')).toString(36)
    await openBrowser(app).post(`/api/receipts/${other}.${end}.${signature}`).expect(404)
  })
})

describe('the button', () => {
  test('records the receipt once, of that person alone, and never acknowledges the alert', async () => {
    const { token, alert, people } = await told(2)
    parts.clock.advance(120)
    const browser = openBrowser(app)
    const first = await browser.post(`/api/receipts/${token}`).expect(200)
    parts.clock.advance(60)
    const second = await browser.post(`/api/receipts/${token}`).expect(200)
    expect(first.body.confirmedAt).not.toBeNull()
    expect(second.body.confirmedAt).toBe(first.body.confirmedAt)
    const deliveries = await Delivery.findAll({
      where: { personId: people.map(({ id }) => id) },
      order: [['id', 'ASC']],
    })
    expect(deliveries.map(({ receivedAt }) => receivedAt?.toISOString() ?? null)).toEqual([
      first.body.confirmedAt,
      null,
    ])
    await alert.reload()
    expect([alert.state, alert.acknowledgedAt]).toEqual(['unacknowledgedActive', null])
    const events = await AlertEvent.findAll({ where: { alertId: alert.id, kind: 'receipt' } })
    expect(events.map(({ personId, text }) => [personId, text])).toEqual([
      [people[0].id, `Receipt confirmed by ${people[0].name}.`],
    ])
    const step = await Escalation.findOne({ where: { alertId: alert.id, step: 0 }, rejectOnEmpty: true })
    expect(step.satisfiedById).toBe(people[0].id)
  })

  test('pressed twice at the same moment records one receipt', async () => {
    const { token, alert } = await told()
    const browser = openBrowser(app)
    await Promise.all([1, 2, 3].map(() => browser.post(`/api/receipts/${token}`).expect(200)))
    expect(await AlertEvent.count({ where: { alertId: alert.id, kind: 'receipt' } })).toBe(1)
  })

  test('pressed from another site is refused', async () => {
    const { token } = await told()
    await request(app).post(`/api/receipts/${token}`).expect(403)
    const foreign = request(app).post(`/api/receipts/${token}`).set('X-Offing', '1').set('Sec-Fetch-Site', 'cross-site')
    await foreign.expect(403)
  })

  test('is refused a day after the e-mail was written, while the page still shows what it was about', async () => {
    const { token } = await told()
    parts.clock.advance(24 * 3600)
    const browser = openBrowser(app)
    expect((await browser.get(`/api/receipts/${token}`).expect(200)).body.isExpired).toBe(true)
    expect((await browser.post(`/api/receipts/${token}`).expect(410)).body.code).toBe('receipt.expired')
  })

  test('works for an operator whose session is past its limit, for the link speaks for itself', async () => {
    const { token } = await told()
    const operator = await makePerson(parts.clock)
    const browser = await signedIn(app, operator.email)
    parts.clock.advance(12 * 3600 - 60)
    await browser.get('/api/session').expect(200)
    parts.clock.advance(11 * 3600)
    await browser.get('/api/session').expect(200)
    await browser.post(`/api/receipts/${token}`).expect(200)
  })

  test('in the e-mail of a flood confirms every alert that it lists, for that person', async () => {
    const { people, listId } = await told()
    for (let n = 0; n < 14; n += 1) {
      await raiseAlert(parts, await makeLimit(parts, { steps: [{ afterSeconds: 0, listIds: [listId] }] }))
    }
    await mail.run()
    const flood = server.caught.find(({ mail: one }) => one.subject?.startsWith('5 more alerts'))
    const token = /receipt\/([\w.-]+)/.exec(flood?.mail.text ?? '')?.[1] ?? ''
    const seen = (await openBrowser(app).get(`/api/receipts/${token}`).expect(200)).body
    expect(seen.others.map(({ stateWords }: ReceiptAlert) => stateWords)).toEqual(
      Array(4).fill('Active, not acknowledged'),
    )
    expect(new Set([seen.alert, ...seen.others].map(({ id }: ReceiptAlert) => id)).size).toBe(5)
    expect(seen.others[0]).toMatchObject({
      title: 'Total height, Outer Ledge',
      value: '2.61 m ± 0.14',
      priority: 'high',
    })
    const { body } = await openBrowser(app).post(`/api/receipts/${token}`).expect(200)
    expect(body.confirmedAt).not.toBeNull()
    expect(body.content.others).toHaveLength(4)
    const received = await Delivery.findAll({ where: { personId: people[0].id } })
    expect(received.filter(({ state }) => state === 'merged').every(({ receivedAt }) => receivedAt !== null)).toBe(true)
    expect(received.filter(({ receivedAt }) => receivedAt !== null)).toHaveLength(6)
  })
})

import type { Express } from 'express'
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import { Audit } from '../../server/models/index.ts'
import { writeTestMessage } from '../../server/services/messages.ts'
import { settingInForce } from '../../server/services/settings.ts'
import { signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
import { startTestMailServer } from '../support/mailCatcher.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let app: Express
let browser: Browser
beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
  const admin = await makePerson(parts.clock, { role: 'admin', name: 'Technician' })
  browser = await signedIn(app, admin.email)
})

const path = '/api/settings/groups/port'
const put = (version: number, content: object, reason = 'Named by the board') =>
  browser.put(path).set('If-Match', `"${version}"`).send({ content, reason })

describe('a group of settings', () => {
  test('is changed with a reason from the version in force, and the slower of two is shown the other’s', async () => {
    const first = (await browser.get(path).expect(200)).body.settings
    expect(first).toMatchObject([{ number: 1, content: { portName: 'Harbour' }, author: null, validFrom: null }])
    const changed = await put(1, { portName: 'North Quay', timeZone: 'Atlantic/Azores' }).expect(200)
    expect(changed.body).toMatchObject({ number: 2, author: { name: 'Technician' }, reason: 'Named by the board' })
    const late = await put(1, { portName: 'South Quay', timeZone: 'Etc/UTC' }).expect(412)
    expect(late.body.current).toEqual(changed.body)
    await browser.put(path).send({ content: {}, reason: 'without a version' }).expect(428)
  })

  test('that cannot be is refused field by field, without a trace', async () => {
    const wrong = await put(2, { portName: '', timeZone: 'Mars/Base', more: 1 }).expect(422)
    expect(wrong.body.errors.map((one: { path: string }) => one.path)).toEqual(
      expect.arrayContaining(['portName', 'timeZone']),
    )
    await put(2, { portName: 'X', timeZone: 'Etc/UTC' }, ' ').expect(422)
    await browser.get('/api/settings/groups/nothing').expect(404)
    expect((await browser.get(path).expect(200)).body.settings).toHaveLength(2)
  })

  test('goes back to an older content as a new version', async () => {
    const back = { number: 1, reason: 'The old name holds' }
    const returned = await browser.post(`${path}/return`).set('If-Match', '"2"').send(back).expect(200)
    expect(returned.body).toMatchObject({ number: 3, content: { portName: 'Harbour' }, reason: 'The old name holds' })
    expect((await settingInForce(parts, 'port')).portName).toBe('Harbour')
    await browser
      .post(`${path}/return`)
      .set('If-Match', '"3"')
      .send({ ...back, number: 9 })
      .expect(404)
    const audits = await Audit.findAll({ where: { action: 'setting.change' }, order: [['id', 'ASC']] })
    expect(audits).toHaveLength(2)
  })

  test('lists all groups with what holds in each', async () => {
    const { settings } = (await browser.get('/api/settings/groups').expect(200)).body
    const names = settings.map((one: { group: string }) => one.group)
    expect(names).toEqual(expect.arrayContaining(['port', 'cautions', 'contact', 'sender', 'retention', 'people']))
  })
})

test('the emergency line and the sender’s name stand in e-mails once they are set', async () => {
  const set = (group: string, content: object, version = 1) =>
    browser
      .put(`/api/settings/groups/${group}`)
      .set('If-Match', `"${version}"`)
      .send({ content, reason: 'Set at the start' })
  await set('contact', { emergencyLine: 'In an emergency call the harbour watch, channel 12' }).expect(200)
  await set('sender', { name: 'Harbour watch' }).expect(200)
  await set('sender', { name: 'Evil\r\nBcc: x' }, 2).expect(422)
  const reader = await makePerson(parts.clock)
  const server = await startTestMailServer()
  const mail = await startDeliverMail(
    { ...parts, environment: { ...parts.environment, smtpUrl: server.url, mailFrom: 'offing@harbour.example' } },
    { isUntimed: true },
  )
  await writeTestMessage(parts, reader.id, { id: reader.id, name: 'Reader' }, 'Harbour')
  await mail.run()
  await mail.stop()
  await server.stop()
  const [caught] = server.caught
  expect(caught?.mail.from?.text).toBe('"Harbour watch" <offing@harbour.example>')
  expect(caught?.mail.text).toContain('In an emergency call the harbour watch, channel 12.')
})

test('an administrator sees how the installation is doing', async () => {
  const { body } = await browser.get('/api/system').expect(200)
  expect(body).toMatchObject({
    node: process.version,
    mail: { waiting: 0, notOutToday: 0, hasServer: false },
    backups: { last: null, lastTest: null, failed: null, failedTest: null },
  })
  expect(body.database.bytes).toBeGreaterThan(0)
  expect(body.database.tables.length).toBeGreaterThan(5)
  expect(body.disk.freeBytes).toBeLessThanOrEqual(body.disk.totalBytes)
  const operator = await makePerson(parts.clock)
  await (await signedIn(app, operator.email)).get('/api/system').expect(403)
})

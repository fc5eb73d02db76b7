import { join } from 'node:path'
import type { Express } from 'express'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import { startMailCatcher } from '../../server/mail/mailCatcher.ts'
import type { MailCatcher } from '../../server/mail/mailCatcher.ts'
import { createTransport } from '../../server/mail/transport.ts'
import { makeLimit, makeList, raiseAlert } from '../support/alerts.ts'
import { signedIn } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let app: Express
let catcher: MailCatcher

beforeAll(async () => {
  parts = await testParts({ INSTALLATION_KIND: 'demonstration' })
  app = createApp(parts)
  catcher = await startMailCatcher({ folder: join(parts.environment.dataFolder, 'mail'), clock: parts.clock })
})

afterAll(() => catcher.stop())

test('what the demonstration sends is listed for operators, and one is read with its pictures inside', async () => {
  const operator = await makePerson(parts.clock)
  const browser = await signedIn(app, operator.email)
  const pilot = await makePerson(parts.clock, { role: null })
  const steps = [{ afterSeconds: 0, listIds: [await makeList(parts, 'Pilots', [pilot.id])] }]
  await raiseAlert(parts, await makeLimit(parts, { steps }))
  const transport = createTransport({ url: catcher.url, from: 'watch@harbour.example', clientName: 'localhost' })
  const mail = await startDeliverMail(parts, { isUntimed: true, transport })
  await mail.run()
  await mail.stop()

  const { body: list } = await browser.get('/api/caughtMails').expect(200)
  expect(list).toMatchObject({ total: 1, mails: [{ to: [pilot.email], receivedAt: parts.clock.now().toISOString() }] })
  const { body: one } = await browser.get(`/api/caughtMails/${list.mails[0].id}`).expect(200)
  expect(one.text).toContain('2.61 m ± 0.14')
  expect(one.html).toContain('Confirm receipt of 0001')
  expect(one.html).not.toContain('cid:')
})

test('a partner sees none of them, and no name leads out of the folder', async () => {
  const partner = await makePerson(parts.clock, { role: 'partner' })
  await (await signedIn(app, partner.email)).get('/api/caughtMails').expect(403)
  const admin = await signedIn(app, (await makePerson(parts.clock, { role: 'admin' })).email)
  for (const name of ['..%2Fjwt-secret', '%2Fetc%2Fpasswd', '2026-12-01T060000.000Z-0000000g']) {
    await admin.get(`/api/caughtMails/${name}`).expect(404)
  }
})

import { afterEach, beforeEach, describe, expect, test } from 'vitest'
import { escalate } from '../../server/jobs/escalate.ts'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import type { DeliverMail } from '../../server/jobs/deliverMail.ts'
import { createTransport } from '../../server/mail/transport.ts'
import { openBrowser } from '../support/browser.ts'
import { makeList } from '../support/alerts.ts'
import { makePerson } from '../support/factories.ts'
import { judgedStation, plainCondition } from '../support/judgedStation.ts'
import { startTestMailServer } from '../support/mailCatcher.ts'
import type { TestMailServer } from '../support/mailCatcher.ts'

const held = judgedStation()
let server: TestMailServer
let mail: DeliverMail

beforeEach(async () => {
  server = await startTestMailServer()
  const transport = createTransport({ url: server.url, from: 'watch@harbour.example', clientName: 'localhost' })
  mail = await startDeliverMail(held.parts, { isUntimed: true, transport })
})
afterEach(async () => {
  await mail.stop()
  await server.stop()
})

async function look(): Promise<void> {
  await escalate(held.parts)
  await mail.run()
}

const plain = { ...plainCondition, onDelaySeconds: 0, offDelaySeconds: 0 }

/** To a pilot at once, to the office when nobody has confirmed within 16 min. */
async function limited() {
  const [pilot, office] = [
    await makePerson(held.parts.clock, { role: null }),
    await makePerson(held.parts.clock, { role: null }),
  ]
  const steps = [
    { afterSeconds: 0, listIds: [await makeList(held.parts, 'Pilots', [pilot.id])] },
    { afterSeconds: 960, listIds: [await makeList(held.parts, 'Harbour office', [office.id])] },
  ]
  const limitId = await held.setLimit({ condition: plain, recipients: { steps, remindEverySeconds: 480 } })
  const kinds = (address: string | null) => server.subjectsTo(address ?? '').map((subject) => subject.split(':')[0])
  return { limitId, toPilot: () => kinds(pilot.email), toOffice: () => kinds(office.email), pilot }
}

describe('from a sea over its limit', () => {
  test('an e-mail with value, history and link goes out, its receipt is confirmed, and the alert stays with the watch', async () => {
    const { limitId, toPilot, toOffice, pilot } = await limited()
    await held.sea(0, 9, { height: 1.4 })
    await held.sea(10, 10, { height: 2.8, sd: 0.14 })
    await look()
    expect([toPilot(), toOffice()]).toEqual([['High'], []])
    const [{ mail: first }] = server.caught
    expect(first.text).toContain('2.80 m ± 0.14')
    expect(first.text).toMatch(/least 1\.40 m, most 2\.80 m; the limit of 2\.50 m dashed/)
    expect(first.attachments.map(({ filename }) => filename)).toEqual(['offing.png', 'waves.png', 'history.png'])

    const token = /receipt\/([\w.-]+)/.exec(first.text ?? '')?.[1] ?? ''
    const anybody = openBrowser(held.app)
    expect((await anybody.get(`/api/receipts/${token}`).expect(200)).body.confirmedAt).toBeNull()
    const { body } = await anybody.post(`/api/receipts/${token}`).expect(200)
    expect(body).toMatchObject({ person: pilot.name, alert: { stateWords: 'Active, not acknowledged' } })
    held.parts.clock.advance(3600)
    await look()
    expect([toPilot(), toOffice()]).toEqual([['High'], []])

    const [alert] = await held.alerts(limitId)
    expect(alert.state).toBe('unacknowledgedActive')
    const detail = await held.desk.get(`/api/alerts/${alert.id}`).expect(200)
    expect(detail.body.told).toMatchObject([{ name: pilot.name, receivedAt: body.confirmedAt }])
    expect(await held.events(alert.id)).toEqual(['raised', 'message', 'receipt'])
  })

  test('that calms and rises again the all-clear goes out, and everything begins anew', async () => {
    const { toPilot, toOffice } = await limited()
    await held.sea(0, 0, { height: 2.8 })
    await look()
    await held.sea(1, 1, { height: 1 })
    await look()
    await held.sea(40, 40, { height: 3 })
    await look()
    expect([toPilot(), toOffice()]).toEqual([['High', 'High, cleared', 'High'], []])
    held.parts.clock.advance(480)
    await look()
    expect(toPilot()).toEqual(['High', 'High, cleared', 'High', 'High, reminder'])
  })

  test('that an operator acknowledges is escalated no further', async () => {
    const { limitId, toOffice } = await limited()
    await held.sea(0, 0, { height: 2.8 })
    await look()
    const [alert] = await held.alerts(limitId)
    await held.desk.post(`/api/alerts/${alert.id}/acknowledge`).send({}).expect(200)
    held.parts.clock.advance(3600)
    await look()
    expect(toOffice()).toEqual([])
  })

  test('nobody acknowledges is escalated to the office at the stored time', async () => {
    const { toOffice } = await limited()
    await held.sea(0, 0, { height: 2.8 })
    await look()
    held.parts.clock.advance(960)
    await look()
    expect(toOffice()).toEqual(['High, not confirmed yet'])
  })
})

test('a drill sends e-mails marked as an exercise', async () => {
  const { limitId, toPilot } = await limited()
  await held.sea(0, 0, { height: 1 })
  const order = { limitId, value: 3.1, note: 'Monthly drill of the watch' }
  await held.desk.post('/api/drills').send(order).expect(201)
  await look()
  expect(toPilot()).toEqual(['EXERCISE High'])
  expect(server.caught[0].mail.text).toMatch(/^EXERCISE EXERCISE EXERCISE/)
})

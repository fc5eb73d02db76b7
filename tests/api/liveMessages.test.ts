import { createServer } from 'node:http'
import type { Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import request from 'supertest'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import { startLive } from '../../server/sockets/live.ts'
import type { Live } from '../../server/sockets/live.ts'
import { createUpgradeDispatcher } from '../../server/sockets/upgrade.ts'
import type { Role } from '../../shared/schemas/session.ts'
import { makeLimit, makeList, raiseAlert } from '../support/alerts.ts'
import { makePerson, usualPassword } from '../support/factories.ts'
import { openLive } from '../support/liveBrowser.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let server: Server
let live: Live

beforeAll(async () => {
  parts = await testParts({ PORT: '8470' })
  server = createServer(createApp(parts))
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  live = await startLive(parts, { upgrades: createUpgradeDispatcher(server), isUntimed: true })
})
afterAll(async () => {
  await live.stop()
  await new Promise((resolve) => server.close(resolve))
})

async function watching(role: Role) {
  const person = await makePerson(parts.clock, { role })
  const session = request(server).post('/api/session').set('X-Offing', '1')
  const answer = await session.send({ email: person.email, password: usualPassword }).expect(200)
  const cookie = answer.get('Set-Cookie')?.[0]?.split(';')[0] ?? ''
  const { port } = server.address() as AddressInfo
  const browser = await openLive(`ws://127.0.0.1:${port}/live`, { Cookie: cookie, Origin: parts.environment.publicUrl })
  return { browser, cookie }
}

test('an operator hears of each e-mail what REST gives, to its acceptance; a partner may not listen', async () => {
  const { browser, cookie } = await watching('operator')
  await browser.join('messages')
  const partner = await watching('partner')
  expect((await partner.browser.join('messages')).refused.map(({ room }) => room)).toEqual(['messages'])

  const pilot = await makePerson(parts.clock, { role: null })
  const steps = [{ afterSeconds: 0, listIds: [await makeList(parts, 'Pilots', [pilot.id])] }]
  await raiseAlert(parts, await makeLimit(parts, { steps }))
  const transport = { send: async () => ({ kind: 'accepted' as const, reply: '250 taken' }) }
  const mail = await startDeliverMail(parts, { isUntimed: true, transport })
  await mail.run()
  await mail.stop()
  await live.settled()

  const body = { kind: 'alert', deliveries: [{ person: { id: pilot.id, name: pilot.name }, state: 'accepted' }] }
  const heard = await browser.next(
    (one) => one.type === 'event' && one.kind === 'message' && JSON.stringify(one.body).includes('"accepted"'),
  )
  expect(heard).toMatchObject({ room: 'messages', body })
  const { body: list } = await request(server).get('/api/messages').set('Cookie', cookie).expect(200)
  expect(heard).toMatchObject({ body: list.messages[0] })
  browser.socket.terminate()
  partner.browser.socket.terminate()
})

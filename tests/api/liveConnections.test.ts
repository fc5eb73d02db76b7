/** An administrator who brings a station up hears of each attempt what REST gives, and of the station that changed. */
import { randomUUID } from 'node:crypto'
import { createServer } from 'node:http'
import type { Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import request from 'supertest'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { startLive } from '../../server/sockets/live.ts'
import type { Live } from '../../server/sockets/live.ts'
import { startTelemetry } from '../../server/sockets/telemetry.ts'
import type { Telemetry } from '../../server/sockets/telemetry.ts'
import { createUpgradeDispatcher } from '../../server/sockets/upgrade.ts'
import type { Role } from '../../shared/schemas/session.ts'
import { connectionAttempt } from '../../shared/schemas/stationSetUpLink.ts'
import { makePerson, makeStation, makeStationKey, usualPassword } from '../support/factories.ts'
import { openLive } from '../support/liveBrowser.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { helloOf, openLink } from '../support/telemetry.ts'

let parts: TestParts
let server: Server
let live: Live
let telemetry: Telemetry

beforeAll(async () => {
  parts = await testParts({ PORT: '8470' })
  server = createServer(createApp(parts))
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const upgrades = createUpgradeDispatcher(server)
  telemetry = await startTelemetry({ ...parts, upgrades, heartbeatMs: 60_000, betweenCommitsMs: 10 })
  live = await startLive(parts, { upgrades, isUntimed: true })
})
afterAll(async () => {
  await live.stop()
  await telemetry.stop()
  await new Promise((resolve) => server.close(resolve))
})

const port = (): number => (server.address() as AddressInfo).port

async function watching(role: Role) {
  const person = await makePerson(parts.clock, { role })
  const session = request(server).post('/api/session').set('X-Offing', '1')
  const answer = await session.send({ email: person.email, password: usualPassword }).expect(200)
  const cookie = answer.get('Set-Cookie')?.[0]?.split(';')[0] ?? ''
  const browser = await openLive(`ws://127.0.0.1:${port()}/live`, {
    Cookie: cookie,
    Origin: parts.environment.publicUrl,
  })
  return { browser, cookie }
}

test('an attempt is told step by step to an administrator, and to nobody else', async () => {
  const { browser, cookie } = await watching('admin')
  await browser.join('connections')
  for (const role of ['operator', 'partner'] as const) {
    const refused = (await (await watching(role)).browser.join('connections')).refused
    expect(refused.map(({ room }) => room)).toEqual(['connections'])
  }
  const made = await makeStation(parts.clock)
  const { key } = await makeStationKey(parts.clock, made.station.id)
  const link = await openLink(`ws://127.0.0.1:${port()}`, key)
  link.send(helloOf(made, { stream: randomUUID(), sentAt: parts.clock.now() }))
  await link.next('welcome')
  const heard = await browser.next((one) => one.type === 'event' && one.kind === 'connection' && connectionAttempt.parse(one.body).reached === 'welcomed') // prettier-ignore
  const path = `/api/stations/${made.station.id}/connections`
  const [shown] = (await request(server).get(path).set('Cookie', cookie).expect(200)).body
  expect(heard).toMatchObject({ room: 'connections', body: shown })
  await link.close()
  await browser.next((one) => one.type === 'event' && one.kind === 'connection' && connectionAttempt.parse(one.body).endedAt !== null) // prettier-ignore
})

test('a station that is changed is told to all who watch', async () => {
  const { browser } = await watching('partner')
  await browser.join('stations')
  const { station } = await makeStation(parts.clock)
  await station.update({ state: 'maintenance' })
  parts.bus.publish('station.changed', { stationId: station.id })
  const heard = await browser.next((one) => one.type === 'event' && one.kind === 'station')
  expect(heard).toMatchObject({ body: { id: station.id, state: 'maintenance' } })
})

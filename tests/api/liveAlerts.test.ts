import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import request from 'supertest'
import { expect, test } from 'vitest'
import { startLive } from '../../server/sockets/live.ts'
import { createUpgradeDispatcher } from '../../server/sockets/upgrade.ts'
import { usualPassword } from '../support/factories.ts'
import { judgedStation, plainCondition } from '../support/judgedStation.ts'
import { openLive } from '../support/liveBrowser.ts'

const held = judgedStation()

test('an alert and its limit reach a browser as REST gives them, when raised and when acknowledged', async () => {
  const server = createServer(held.app)
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const live = await startLive(held.parts, { upgrades: createUpgradeDispatcher(server), isUntimed: true })
  const session = request(server).post('/api/session').set('X-Offing', '1')
  const signed = await session.send({ email: held.otherOfficer.email, password: usualPassword }).expect(200)
  const Cookie = signed.get('Set-Cookie')?.[0]?.split(';')[0] ?? ''
  const { port } = server.address() as AddressInfo
  const browser = await openLive(`ws://127.0.0.1:${port}/live`, { Cookie, Origin: held.parts.environment.publicUrl })
  await browser.join('alerts', 'limits')

  const limitId = await held.setLimit({ condition: { ...plainCondition, onDelaySeconds: 0 } })
  await held.sea(0, 0, { height: 2.8 })
  const [alert] = await held.alerts(limitId)
  const raised = await browser.next((one) => one.type === 'event' && one.room === 'alerts')
  expect(raised).toMatchObject({ kind: 'alert', body: { id: alert?.id, state: 'unacknowledgedActive' } })

  await held.desk.post(`/api/alerts/${alert?.id}/acknowledge`).send({}).expect(200)
  await live.settled()
  const text = (state: string) => `"state":"${state}"`
  const acknowledged = await browser.next(
    (one) =>
      one.type === 'event' && one.room === 'alerts' && JSON.stringify(one.body).includes(text('acknowledgedActive')),
  )
  const board = (await held.desk.get('/api/alerts').expect(200)).body
  expect(acknowledged).toMatchObject({ body: board.alerts[0] })
  const limit = await browser.next(
    (one) =>
      one.type === 'event' && one.room === 'limits' && JSON.stringify(one.body).includes(text('acknowledgedActive')),
  )
  expect(limit).toMatchObject({ kind: 'limit', body: { id: limitId, openAlertId: alert?.id } })
  await live.stop()
  await new Promise((resolve) => server.close(resolve))
})

/** The database is killed while e-mails are being handed over: each is out in the end, and a copy is known as such. */
import { afterAll, beforeAll, expect, test } from 'vitest'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import { createTransport } from '../../server/mail/transport.ts'
import { connectDatabase, createDatabase, migrate } from '../../server/config/database.ts'
import { Delivery } from '../../server/models/index.ts'
import { execute } from '../../server/models/sql.ts'
import { makeLimit, makeList, raiseAlert } from '../support/alerts.ts'
import { makePerson } from '../support/factories.ts'
import { startTestMailServer } from '../support/mailCatcher.ts'
import type { TestMailServer } from '../support/mailCatcher.ts'
import { startMariadb } from '../support/mariadb.ts'
import type { DatabaseServer } from '../support/mariadb.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { until } from '../support/until.ts'

const people = 9
let database: DatabaseServer
let server: TestMailServer
let parts: TestParts

beforeAll(async () => {
  database = await startMariadb({ durable: true })
  const outside = connectDatabase({ url: database.url, poolSize: 1 })
  await execute(outside, 'CREATE DATABASE offing_mail_loss')
  await outside.close()
  const usual = await testParts()
  const sequelize = createDatabase({ url: `${database.url}offing_mail_loss`, poolSize: 3 })
  await migrate(sequelize)
  parts = { ...usual, sequelize }
  server = await startTestMailServer()
})
afterAll(async () => {
  await server.stop()
  await parts.sequelize.close()
  await database.stop()
})

test('killed between two e-mails of one alert, the database loses none, and none comes a third time', async () => {
  const ids: number[] = []
  for (let n = 0; n < people; n += 1) ids.push((await makePerson(parts.clock, { role: null })).id)
  const version = await makeLimit(parts, {
    steps: [{ afterSeconds: 0, listIds: [await makeList(parts, 'All', ids)] }],
  })
  await raiseAlert(parts, version)
  const transport = createTransport({ url: server.url, from: 'watch@harbour.example', clientName: 'localhost' })
  const first = await startDeliverMail(parts, { isUntimed: true, transport })
  server.slowness = 150
  const broken = first.run().then(
    () => 'went through',
    () => 'broke off',
  )
  await until('some e-mails are taken', async () => server.caught.length >= 3, 10_000)
  await database.kill()
  expect(await broken).toBe('broke off')
  await first.stop()
  const before = server.caught.length
  expect(before).toBeLessThan(people)
  await database.start()
  server.slowness = 0
  const isBack = async () =>
    Delivery.count().then(
      () => true,
      () => false,
    )
  await until('the database answers', isBack, 10_000)
  const second = await startDeliverMail(parts, { isUntimed: true, transport })
  for (let turn = 0; turn < 3; turn += 1) {
    await second.run()
    parts.clock.advance(120)
  }
  await second.stop()
  const deliveries = await Delivery.findAll()
  expect(deliveries.map(({ state }) => state)).toEqual(Array(people).fill('accepted'))
  const copies = deliveries.map(({ address, messageIdHeader }) => {
    const own = server.caught.filter(({ to }) => to === address)
    expect(new Set(own.map(({ mail }) => mail.messageId))).toEqual(new Set([messageIdHeader]))
    if (own.length > 1) expect(own.at(-1)?.mail.text).toContain('It may reach you twice')
    return own.length
  })
  expect(Math.max(...copies)).toBeLessThanOrEqual(2)
  // Only what was under way at the kill, three side by side, can have come twice.
  expect(copies.filter((count) => count === 2).length).toBeLessThanOrEqual(3)
})

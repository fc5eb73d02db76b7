import type { Express } from 'express'
import request from 'supertest'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { systemClock } from '../../server/config/clock.ts'
import { connectDatabase, createDatabase, migrate } from '../../server/config/database.ts'
import { lockDatabase } from '../../server/config/databaseLock.ts'
import { execute } from '../../server/models/sql.ts'
import { startServer } from '../../server/server.ts'
import { freePort } from '../../server/setup/freePort.ts'
import type { Browser } from '../support/browser.ts'
import { signedIn } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
import { startMariadb } from '../support/mariadb.ts'
import type { DatabaseServer } from '../support/mariadb.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { until } from '../support/until.ts'

let database: DatabaseServer
let parts: TestParts
let app: Express
let browser: Browser
let url: string

beforeAll(async () => {
  database = await startMariadb({ durable: true })
  url = `${database.url}offing_loss`
  const outside = connectDatabase({ url: database.url, poolSize: 1 })
  await execute(outside, 'CREATE DATABASE offing_loss')
  await outside.close()
  const usual = await testParts()
  const sequelize = createDatabase({ url, poolSize: 3 })
  await migrate(sequelize)
  parts = { ...usual, sequelize }
  app = createApp(parts)
  browser = await signedIn(app, (await makePerson(parts.clock)).email)
})
afterAll(async () => {
  await parts.sequelize.close()
  await database.stop()
})

const isReady = async () => (await request(app).get('/readyz')).status === 200

describe('while the database is lost', () => {
  test('the API says so, health says alive, readiness says why, and all is well again when it is back', async () => {
    let isTaken = false
    const lock = await lockDatabase(url, parts.logger, () => (isTaken = true))
    await database.kill()
    const answer = await browser.get('/api/settings').expect(503)
    expect(answer.body).toMatchObject({
      code: 'database.unavailable',
      detail: 'Nothing was lost. Try again in a moment.',
    })
    expect(answer.get('Retry-After')).toBe('2')
    expect(JSON.stringify(answer.body)).not.toMatch(/ECONN|127\.0\.0\.1|Sequelize/)
    await request(app).get('/healthz').expect(200)
    await request(app)
      .get('/readyz')
      .expect(503, { ready: false, reasons: ['the database does not answer'] })
    await database.start()
    await until('the server is ready again', isReady, 5_000)
    await browser.get('/api/settings').expect(200)
    await until('the database is held again', () => parts.log.join().includes('held again'), 5_000)
    expect(await lockDatabase(url, parts.logger, () => undefined)).toBeNull()
    expect(isTaken).toBe(false)
    await lock?.release()
  })

  test('because it stalls, requests are answered within seconds, and go on when it does', async () => {
    database.process().kill('SIGSTOP')
    const answers = await Promise.all(Array.from({ length: 6 }, () => browser.get('/api/settings')))
    expect(answers.map(({ status, body }) => [status, body.code])).toEqual(
      answers.map(() => [503, 'database.unavailable']),
    )
    await request(app).get('/healthz').expect(200)
    database.process().kill('SIGCONT')
    await until('the server is ready again', isReady, 5_000)
    await browser.get('/api/settings').expect(200)
  })

  test('at the start, the server is alive, says why it is not ready, and goes on when the database is there', async () => {
    await database.kill()
    const port = await freePort()
    const environment = { ...parts.environment, databaseUrl: url, port }
    const starting = startServer({ environment, clock: systemClock, logger: parts.logger, onFatal: () => undefined })
    const at = request(`http://127.0.0.1:${port}`)
    await until(
      'the server answers',
      () =>
        at.get('/healthz').then(
          () => true,
          () => false,
        ),
      5_000,
    )
    await at.get('/readyz').expect(503, { ready: false, reasons: ['starting', 'the database does not answer'] })
    expect((await at.get('/api/installation').expect(503)).body.code).toBe('server.starting')
    await database.start()
    const server = await starting
    await at.get('/readyz').expect(200)
    expect((await at.get('/api/installation').expect(200)).body.needsSetUp).toBe(true)
    await server.stop()
  })
})

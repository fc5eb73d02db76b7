import { spawn } from 'node:child_process'
import { mkdtemp, readFile, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import request from 'supertest'
import { afterEach, beforeAll, describe, expect, inject, test } from 'vitest'
import { systemClock } from '../../server/config/clock.ts'
import { connectDatabase } from '../../server/config/database.ts'
import { readEnvironment } from '../../server/config/environment.ts'
import { createLogger } from '../../server/config/logger.ts'
import { execute } from '../../server/models/sql.ts'
import { startServer } from '../../server/server.ts'
import type { RunningServer } from '../../server/server.ts'
import { createSchema } from '../support/database.ts'
import { testSecret } from '../support/parts.ts'
import { until } from '../support/until.ts'

const root = fileURLToPath(new URL('../..', import.meta.url))
const stops: (() => Promise<unknown>)[] = []
afterEach(async () => {
  for (const stop of stops.splice(0).reverse()) await stop()
})

let url: string
let folder: string
beforeAll(async () => {
  url = await createSchema()
  folder = await mkdtemp(join(tmpdir(), 'offing-start-'))
  return () => rm(folder, { recursive: true })
})

const variables = (changed: Record<string, string> = {}) => ({
  NODE_ENV: 'test',
  INSTALLATION_KIND: 'demonstration',
  DATABASE_URL: url,
  DATA_DIR: folder,
  JWT_SECRET: testSecret,
  BCRYPT_COST: '4',
  PORT: '0',
  WORKERS: '1',
  ...changed,
})

async function start(changed: Record<string, string> = {}): Promise<{ server: RunningServer; log: string[] }> {
  const log: string[] = []
  const server = await startServer({
    environment: readEnvironment(variables(changed)),
    clock: systemClock,
    logger: createLogger('info', { write: (line) => void log.push(line) }),
    onFatal: (reason) => log.push(reason),
  })
  stops.push(() => server.stop())
  return { server, log }
}

describe('the server', () => {
  test('on an empty database brings up schema and demonstration, and is ready', async () => {
    const { server } = await start()
    const at = request(`http://127.0.0.1:${server.port}`)
    await at.get('/readyz').expect(200, { ready: true, reasons: [] })
    expect((await at.get('/api/installation').expect(200)).body).toMatchObject({
      kind: 'demonstration',
      portName: 'Marrowick',
      needsSetUp: false,
    })
  })

  test('says in one sentence that another one works with its database', async () => {
    await start()
    await expect(start()).rejects.toThrow('Another Offing server works with this database: one server a database.')
  })

  test('says in one sentence that its port is in use', async () => {
    const { server } = await start()
    const PORT = String(server.port)
    await expect(start({ PORT })).rejects.toThrow(`Port ${PORT} on 127.0.0.1 is in use: set PORT to a free one.`)
  })

  test('for real use refuses the database of a demonstration, and the other way round', async () => {
    await expect(start({ INSTALLATION_KIND: 'real' })).rejects.toThrow('This database holds a demonstration')
    const real = await createSchema()
    await (await start({ INSTALLATION_KIND: 'real', DATABASE_URL: real })).server.stop()
    await expect(start({ DATABASE_URL: real })).rejects.toThrow('This database is in real use')
  })

  test('for real use without an administrator says where the set-up token lies, and not what it is', async () => {
    const { log } = await start({ INSTALLATION_KIND: 'real', DATABASE_URL: await createSchema() })
    const file = join(folder, 'set-up-token')
    expect(log.join()).toContain(JSON.stringify(file))
    expect(log.join()).toContain('/first-administrator')
    expect(log.join()).not.toContain((await readFile(file, 'utf8')).trim())
  })

  test('says in one sentence that its folder cannot be made', async () => {
    const DATA_DIR = join(root, 'package.json', 'inside')
    await expect(start({ DATA_DIR })).rejects.toThrow(`The folder ${DATA_DIR} cannot be made or written`)
  })

  test('leaves a database alone that holds something else', async () => {
    const other = await createSchema()
    const database = connectDatabase({ url: other })
    stops.push(() => database.close())
    await execute(database, 'CREATE TABLE ships (id INT)')
    await expect(start({ DATABASE_URL: other })).rejects.toThrow('already holds other tables (ships)')
  })

  test.each([
    ['a wrong password', (right: string) => right.replace(/:\w+@/, ':wrong@'), 'refuses the user or password'],
    ['a database that does not exist', (right: string) => `${right}x`, 'does not exist: create it first'],
    ['a database it has no right to', () => `${inject('databaseServerUrl')}mysql`, 'has no right to the database'],
  ])('says in one sentence what is wrong with %s', async (_circumstance, wrong, sentence) => {
    await expect(start({ DATABASE_URL: wrong(url) })).rejects.toThrow(sentence)
  })
})

describe('the process', () => {
  function run(changed: Record<string, string> = {}) {
    const child = spawn(process.execPath, ['--import', 'tsx', 'server/index.ts'], {
      cwd: root,
      env: { PATH: process.env.PATH ?? '', ...variables(changed) },
    })
    let said = ''
    child.stdout.on('data', (text) => (said += text))
    child.stderr.on('data', (text) => (said += text))
    const exit = new Promise<number | null>((resolve) => child.once('exit', resolve))
    stops.push(async () => child.kill('SIGKILL'))
    return { child, exit, said: () => said }
  }

  test('asked to end does so in order and says that all is well', async () => {
    const { child, exit, said } = run()
    await until('the server is ready', async () => said().includes('"msg":"ready"'), 15_000)
    child.kill('SIGTERM')
    expect(await exit).toBe(0)
    expect(said()).toContain('"msg":"stopped"')
  })

  test('with a configuration that cannot be used says every fault and ends', async () => {
    const { exit, said } = run({ PORT: 'many', JWT_SECRET: 'short' })
    expect(await exit).toBe(1)
    expect(said()).toBe(
      'The configuration cannot be used:\n  - PORT: must be a whole number\n' +
        '  - JWT_SECRET: the secret is weak; at least 32 random characters are needed\n',
    )
  })
})

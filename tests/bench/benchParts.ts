/** What every measurement needs: a figure's shape, a database of its own, the world as the server is given it. */
import { randomUUID } from 'node:crypto'
import { pino } from 'pino'
import { systemClock } from '../../server/config/clock.ts'
import { createDatabase, migrate } from '../../server/config/database.ts'
import { readEnvironment } from '../../server/config/environment.ts'
import type { Parts } from '../../server/config/parts.ts'
import { execute } from '../../server/models/sql.ts'
import { createBus } from '../../server/services/bus.ts'
import type { DatabaseServer } from '../support/mariadb.ts'

export interface Figure {
  what: string
  value: number
  unit: string
}

let made = 0

/** An empty schema; answers its URL. */
export async function createBenchSchema(server: DatabaseServer): Promise<string> {
  made += 1
  const outside = createDatabase({ url: server.url, poolSize: 1 })
  await execute(outside, `CREATE DATABASE offing_bench${made}`)
  await outside.close()
  return `${server.url}offing_bench${made}`
}

export async function benchParts(url: string): Promise<Parts> {
  const sequelize = createDatabase({ url })
  await migrate(sequelize)
  const logger = pino({ level: 'warn' })
  const environment = readEnvironment({
    NODE_ENV: 'test',
    INSTALLATION_KIND: 'real',
    DATABASE_URL: url,
    DATA_DIR: '/nowhere',
    JWT_SECRET: randomUUID() + randomUUID(),
    BCRYPT_COST: '4',
  })
  return { sequelize, bus: createBus((error) => logger.error({ error })), clock: systemClock, logger, environment }
}

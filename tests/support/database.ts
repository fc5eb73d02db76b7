/** A fresh, migrated schema for one test file. */
import { randomBytes } from 'node:crypto'
import type { Sequelize } from 'sequelize'
import { afterAll, inject } from 'vitest'
import { connectDatabase, createDatabase, migrate } from '../../server/config/database.ts'
import { execute } from '../../server/models/sql.ts'

export interface TestDatabase {
  sequelize: Sequelize
  url: string
}

/** Makes an empty schema on the tests' database server and answers its URL. */
export async function createSchema(): Promise<string> {
  const server = inject('databaseServerUrl')
  const name = `offing_${randomBytes(6).toString('hex')}`
  const outside = connectDatabase({ url: server, poolSize: 1 })
  await execute(outside, `CREATE DATABASE \`${name}\``)
  await outside.close()
  return `${server}${name}`
}

/** To be called at the top of a file or in `beforeAll`; the schema is dropped after the file's last test. */
export async function freshDatabase(): Promise<TestDatabase> {
  const url = await createSchema()
  const sequelize = createDatabase({ url, poolSize: 5 })
  await migrate(sequelize)
  afterAll(async () => {
    await execute(sequelize, `DROP DATABASE \`${new URL(url).pathname.slice(1)}\``)
    await sequelize.close()
  })
  return { sequelize, url }
}

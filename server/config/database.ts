/** The connection to MariaDB, and its schema brought up to date. */
import { readdir } from 'node:fs/promises'
import { fileURLToPath, pathToFileURL } from 'node:url'
import { Sequelize } from 'sequelize'
import { SequelizeStorage, Umzug } from 'umzug'
import { defineModels } from '../models/index.ts'

export interface DatabaseOptions {
  url: string
  /** Connections held at most. */
  poolSize?: number
  /** Hears every statement; absent: none is logged. */
  onStatement?: (sql: string, milliseconds: number) => void
}

/** Opens nothing yet: the pool connects at the first query, and again by itself after the database was lost. */
export function connectDatabase({ url, poolSize = 10, onStatement }: DatabaseOptions): Sequelize {
  return new Sequelize(url, {
    dialect: 'mariadb',
    timezone: '+00:00',
    benchmark: true,
    logging: onStatement ? (sql, milliseconds) => onStatement(sql, milliseconds ?? 0) : false,
    define: { timestamps: false, charset: 'utf8mb4' },
    pool: { max: poolSize, min: 0, acquire: 4_000, idle: 30_000, evict: 5_000 },
    dialectOptions: {
      connectTimeout: 3_000,
      initSql: [
        "SET sql_mode = 'STRICT_ALL_TABLES,NO_ZERO_DATE,NO_ZERO_IN_DATE,ERROR_FOR_DIVISION_BY_ZERO'",
        'SET innodb_lock_wait_timeout = 5',
        'SET NAMES utf8mb4 COLLATE utf8mb4_unicode_ci',
      ],
    },
  })
}

/** The database that the models work on: one for the whole process, the latest one made. */
export function createDatabase(options: DatabaseOptions): Sequelize {
  const sequelize = connectDatabase(options)
  defineModels(sequelize)
  return sequelize
}

const migrationsFolder = fileURLToPath(new URL('../migrations/', import.meta.url))

interface Migration {
  up(sequelize: Sequelize): Promise<void>
}

async function migrationsInOrder(sequelize: Sequelize) {
  const names = (await readdir(migrationsFolder)).filter((name) => name.endsWith('.ts')).sort()
  return names.map((file) => ({
    name: file.replace(/\.ts$/, ''),
    async up() {
      const migration: Migration = await import(pathToFileURL(migrationsFolder + file).href)
      await migration.up(sequelize)
    },
  }))
}

async function createUmzug(sequelize: Sequelize) {
  return new Umzug({
    migrations: await migrationsInOrder(sequelize),
    storage: new SequelizeStorage({ sequelize, tableName: 'migrations', modelName: 'migration' }),
    logger: undefined,
  })
}

/** Brings the schema up to date and answers the names of what was done. A stop in the middle is made good by the next run. */
export async function migrate(sequelize: Sequelize): Promise<string[]> {
  const done = await (await createUmzug(sequelize)).up()
  return done.map(({ name }) => name)
}

/** Names of what is still to be done: asked by readiness. */
export async function pendingMigrations(sequelize: Sequelize): Promise<string[]> {
  const pending = await (await createUmzug(sequelize)).pending()
  return pending.map(({ name }) => name)
}

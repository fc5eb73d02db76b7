/** Starts everything in order and ends it in the opposite one. */
import { access, constants, mkdir } from 'node:fs/promises'
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import type { Sequelize } from 'sequelize'
import { createApp } from './app.ts'
import type { Clock } from './config/clock.ts'
import { createDatabase, migrate } from './config/database.ts'
import { isDatabaseUnavailable } from './config/databaseFaults.ts'
import { lockDatabase } from './config/databaseLock.ts'
import type { DatabaseLock } from './config/databaseLock.ts'
import type { Environment } from './config/environment.ts'
import type { Logger } from './config/logger.ts'
import type { Parts } from './config/parts.ts'
import { listen, stopListening } from './config/listen.ts'
import { startRunningParts } from './runningParts.ts'
import type { StoppableParts } from './runningParts.ts'
import { seedDemonstration } from './seeders/demonstration.ts'
import { createBus } from './services/bus.ts'
import { claimInstallation, refuseForeignTables, StartRefused } from './services/installation.ts'
import { offerSetUp } from './services/people/setUp.ts'
import { createReadiness, starting } from './services/readiness.ts'

export interface RunningServer {
  port: number
  /** Ends everything in order; a second call waits for the first. */
  stop(): Promise<void>
}

export interface StartOptions {
  environment: Environment
  clock: Clock
  logger: Logger
  /** The server cannot go on, and why; it is to be stopped. */
  onFatal(reason: string): void
}

const againMilliseconds = 500

/** Answers at once, with 503 where the database is needed, and resolves when all is running. */
export async function startServer({ environment, clock, logger, onFatal }: StartOptions): Promise<RunningServer> {
  const sequelize = createDatabase({ url: environment.databaseUrl })
  const bus = createBus((error) => logger.error({ error }, 'a listener failed'))
  const parts: Parts = { sequelize, bus, clock, logger, environment }
  const readiness = createReadiness()
  readiness.wait(starting)
  const server = createServer(createApp(parts, readiness))
  let lock: DatabaseLock | null = null
  let running: StoppableParts | null = null

  const stop = once(async () => {
    readiness.wait('stopping')
    await running?.stop()
    await stopListening(server)
    await closeDatabase(sequelize, logger)
    await lock?.release()
  })
  try {
    await prepareDataFolder(environment)
    await listen(server, environment)
    lock = await patiently(logger, () => holdDatabase(environment, logger, onFatal))
    await patiently(logger, () => prepareDatabase(parts))
    running = await startRunningParts(parts, server)
  } catch (error) {
    await stop()
    throw error
  }
  readiness.over(starting)
  const { port } = server.address() as AddressInfo
  logger.info({ host: environment.host, port, kind: environment.installationKind }, 'ready')
  return { port, stop }
}

async function prepareDataFolder({ dataFolder }: Environment): Promise<void> {
  try {
    await mkdir(dataFolder, { recursive: true, mode: 0o700 })
    await access(dataFolder, constants.W_OK)
  } catch {
    throw new StartRefused(`The folder ${dataFolder} cannot be made or written: set DATA_DIR to one that can.`)
  }
}

/** While the database does not answer, asks again: it may be starting too. */
async function patiently<Result>(logger: Logger, work: () => Promise<Result>): Promise<Result> {
  for (let isSaid = false; ; isSaid = true) {
    try {
      return await work()
    } catch (error) {
      if (!isDatabaseUnavailable(error)) throw error
      if (!isSaid) logger.warn({ error }, 'the database does not answer yet')
      await new Promise((resolve) => setTimeout(resolve, againMilliseconds))
    }
  }
}

async function holdDatabase(
  { databaseUrl }: Environment,
  logger: Logger,
  onFatal: (reason: string) => void,
): Promise<DatabaseLock> {
  const anotherServer = 'Another Offing server works with this database: one server a database.'
  const lock = await lockDatabase(databaseUrl, logger, () => onFatal(anotherServer)).catch((error: unknown) => {
    throw databaseRefusal(error) ?? error
  })
  if (!lock) throw new StartRefused(anotherServer)
  return lock
}

/** What a person can mend in DATABASE_URL or in the database's own rights. */
function databaseRefusal(error: unknown): StartRefused | null {
  const code = error instanceof Error && 'code' in error ? error.code : ''
  const sentences: Record<string, string> = {
    ER_ACCESS_DENIED_ERROR: 'The database refuses the user or password in DATABASE_URL.',
    ER_DBACCESS_DENIED_ERROR: 'The user in DATABASE_URL has no right to the database named there.',
    ER_BAD_DB_ERROR: 'The database named in DATABASE_URL does not exist: create it first.',
  }
  const sentence = sentences[String(code)]
  return sentence ? new StartRefused(sentence) : null
}

/** Schema, kind, first content: each step may be repeated after a stop in the middle. */
async function prepareDatabase(parts: Parts): Promise<void> {
  const { logger, sequelize, environment } = parts
  await refuseForeignTables(sequelize)
  const migrated = await migrate(sequelize)
  if (migrated.length > 0) logger.info({ migrations: migrated }, 'the schema was brought up to date')
  await claimInstallation(parts)
  if (environment.installationKind === 'demonstration') await seedDemonstration(parts)
  const file = await offerSetUp(parts)
  if (!file) return
  const page = `${environment.publicUrl}/first-administrator`
  logger.warn({ file, page }, 'there is no administrator yet: the one-time set-up token lies in this file, its page is')
}

async function closeDatabase(sequelize: Sequelize, logger: Logger): Promise<void> {
  await sequelize.close().catch((error: unknown) => logger.warn({ error }, 'the database connections did not close'))
}

function once(work: () => Promise<void>): () => Promise<void> {
  let done: Promise<void> | null = null
  return () => (done ??= work())
}

/** What commands work with beside a running server: the database of DATABASE_URL, else the demonstration's. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { systemClock } from '../config/clock.ts'
import { createDatabase } from '../config/database.ts'
import { ConfigurationError, readEnvironment } from '../config/environment.ts'
import { createLogger } from '../config/logger.ts'
import type { Parts } from '../config/parts.ts'
import { createBus } from '../services/bus.ts'

/** Said in one line on standard error, with exit code 2. */
export class CommandFault extends Error {}

export const say = (sentence: string): void => void process.stdout.write(`${sentence}\n`)

/** Runs a command to its exit code; what a person can mend is said in plain words. */
export async function runCommand(work: () => Promise<number>): Promise<void> {
  try {
    process.exitCode = await work()
  } catch (error) {
    if (!(error instanceof CommandFault) && !(error instanceof ConfigurationError)) throw error
    process.stderr.write(`${error.message}\n`)
    process.exitCode = 2
  }
}

/** The demonstration writes the address of its own database beside it while it runs, and its secret. */
function variables(): Record<string, string | undefined> {
  const { env } = process
  if (env.DATABASE_URL) return env
  const folder = env.DATA_DIR ?? 'var'
  try {
    const url = readFileSync(join(folder, 'database', 'url'), 'utf8').trim()
    const secret = env.JWT_SECRET_FILE ?? (env.JWT_SECRET ? undefined : join(folder, 'jwt-secret'))
    return { ...env, INSTALLATION_KIND: 'demonstration', DATABASE_URL: url, JWT_SECRET_FILE: secret }
  } catch {
    throw new CommandFault('Set DATABASE_URL, or start the demonstration first: its database is used then.')
  }
}

/** No lock is taken: a command reads, or writes what stands by itself. */
export function commandParts(): Parts & { close(): Promise<void> } {
  const environment = readEnvironment(variables())
  const sequelize = createDatabase({ url: environment.databaseUrl, poolSize: 2 })
  const logger = createLogger('silent')
  const bus = createBus(() => undefined)
  return { sequelize, environment, logger, bus, clock: systemClock, close: () => sequelize.close() }
}

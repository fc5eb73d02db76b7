/** What `npm start` works with: the environment of the server with every part that is not given made our own. */
import { join } from 'node:path'
import { ConfigurationError, isLoopback, readEnvironment } from '../config/environment.ts'
import type { Environment } from '../config/environment.ts'
import { PlainFailure } from './plainFailure.mjs'

/** Stands in for the database's address while the other values are checked: our own is known only once it runs. */
const ownDatabaseToCome = 'mariadb://offing@127.0.0.1/offing'

export interface StartSettings {
  environment: Environment
  /** Handed to the server and the simulator; the addresses of parts of our own are added when they run. */
  variables: Record<string, string | undefined>
  ownDatabase: boolean
  ownMailCatcher: boolean
  /** Absent: any free one. */
  databasePort: number | undefined
  /** Where the demonstration's past is kept. */
  pastFolder: string
  scenario: string
  backfill: string
}

export function readStartSettings(
  source: Record<string, string | undefined>,
  dataFolder: string,
  secretFile: string,
): StartSettings {
  const host = source.HOST || '127.0.0.1'
  if (!isLoopback(host)) {
    throw new PlainFailure(
      `npm start runs the demonstration, whose passwords are printed: it answers on loopback only, not on ${host}. For real use: npm run serve.`,
    )
  }
  const variables = {
    ...source,
    INSTALLATION_KIND: 'demonstration',
    HOST: host,
    DATA_DIR: dataFolder,
    DEMONSTRATION_PAST_DIR: source.DEMONSTRATION_PAST_DIR || join(dataFolder, 'past'),
    JWT_SECRET_FILE: source.JWT_SECRET_FILE || (source.JWT_SECRET ? undefined : secretFile),
  }
  try {
    const environment = readEnvironment({ ...variables, DATABASE_URL: source.DATABASE_URL || ownDatabaseToCome })
    return {
      environment,
      variables,
      ownDatabase: !source.DATABASE_URL,
      ownMailCatcher: !source.SMTP_URL,
      databasePort: source.DATABASE_PORT ? Number(source.DATABASE_PORT) : undefined,
      pastFolder: environment.demonstrationPastFolder ?? join(dataFolder, 'past'),
      scenario: source.SCENARIO || 'demonstration',
      backfill: source.BACKFILL || '25m',
    }
  } catch (error) {
    if (error instanceof ConfigurationError) throw new PlainFailure(error.message)
    throw error
  }
}

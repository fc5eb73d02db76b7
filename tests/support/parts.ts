/** The world that services and routes are given, held by the test: its clock, its bus, its log, its database. */
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll } from 'vitest'
import { readEnvironment } from '../../server/config/environment.ts'
import { createLogger } from '../../server/config/logger.ts'
import type { Parts } from '../../server/config/parts.ts'
import { createBus } from '../../server/services/bus.ts'
import type { News } from '../../server/services/bus.ts'
import { freshDatabase } from './database.ts'
import { fakeClock } from './fakeClock.ts'
import type { FakeClock } from './fakeClock.ts'

export const testSecret = 'k7Qw2ZpX9vRt4LmN8sBc1JdF6hGyUe3A'

export interface TestParts extends Parts {
  clock: FakeClock
  /** Everything that was logged, a line of JSON each. */
  log: string[]
  /** All news since the start, oldest first. */
  news: { topic: keyof News; news: News[keyof News] }[]
}

const topics: (keyof News)[] = [
  'readings.stored',
  'link.changed',
  'estimate.saved',
  'session.ended',
  'person.changed',
  'stationKey.revoked',
  'job.progressed',
]

/** To be called in `beforeAll`: everything it made goes after the file's last test. */
export async function testParts(variables: Record<string, string> = {}): Promise<TestParts> {
  const { sequelize, url } = await freshDatabase()
  const folder = await mkdtemp(join(tmpdir(), 'offing-test-'))
  afterAll(() => rm(folder, { recursive: true, force: true }))
  const environment = readEnvironment({
    NODE_ENV: 'test',
    INSTALLATION_KIND: 'real',
    DATABASE_URL: url,
    DATA_DIR: folder,
    JWT_SECRET: testSecret,
    BCRYPT_COST: '4',
    ...variables,
  })
  const log: string[] = []
  const logger = createLogger('debug', { write: (line) => void log.push(line) })
  const bus = createBus((error) => logger.error({ error }, 'a listener failed'))
  const news: TestParts['news'] = []
  for (const topic of topics) bus.subscribe(topic, (heard) => news.push({ topic, news: heard }))
  return { sequelize, bus, clock: fakeClock(), logger, environment, log, news }
}

/** The running program for browser and fault tests: its own MariaDB, the server, the simulator, on free ports of loopback. */
import { spawn } from 'node:child_process'
import type { ChildProcess } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import { closeSync, openSync } from 'node:fs'
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { z } from 'zod'
import { systemClock } from '../../server/config/clock.ts'
import { createDatabase } from '../../server/config/database.ts'
import { startMailCatcher } from '../../server/mail/mailCatcher.ts'
import { execute } from '../../server/models/sql.ts'
import { readDemonstrationPeople, stationKeysFile } from '../../server/setup/demonstrationPeople.ts'
import type { DemonstrationPerson } from '../../server/setup/demonstrationPeople.ts'
import { freePort } from '../../server/setup/freePort.ts'
import { startMariadb } from './mariadb.ts'
import type { DatabaseServer } from './mariadb.ts'
import { until } from './until.ts'

const root = fileURLToPath(new URL('../..', import.meta.url))

export interface Killable {
  /** As a crash would. */
  kill(): Promise<void>
  start(): Promise<void>
  /** Asked to end; answers its exit code, null when a signal ended it. */
  end(): Promise<number | null>
  running(): ChildProcess | null
}

export interface Program {
  url: string
  dataFolder: string
  databaseUrl: string
  databaseServer: DatabaseServer
  server: Killable
  people: DemonstrationPerson[]
  keys: Record<string, string>
  /** Not yet started. */
  simulator(args: string[]): Promise<Killable & { truthUrl: string }>
  logOf(name: string): Promise<string>
  stop(): Promise<void>
}

/** A TypeScript program of ours that may be killed and started again; what it says goes to a file. */
function killable(args: string[], env: NodeJS.ProcessEnv, logFile: string): Killable {
  let child: ChildProcess | null = null
  const ended = (process: ChildProcess): Promise<void> =>
    process.exitCode !== null || process.signalCode !== null
      ? Promise.resolve()
      : new Promise((resolve) => process.once('exit', () => resolve()))
  const endWith = async (signal: NodeJS.Signals) => {
    const ending = child
    child = null
    if (!ending) return null
    ending.kill(signal)
    await ended(ending)
    return ending.exitCode
  }
  process.once('exit', () => child?.kill('SIGKILL'))
  return {
    async start() {
      const log = openSync(logFile, 'a')
      child = spawn(process.execPath, ['--import', 'tsx', ...args], { cwd: root, env, stdio: ['ignore', log, log] })
      closeSync(log)
    },
    kill: async () => void (await endWith('SIGKILL')),
    end: () => endWith('SIGTERM'),
    running: () => child,
  }
}

const isReady = async (url: string): Promise<boolean> => {
  try {
    return (await fetch(`${url}/readyz`, { signal: AbortSignal.timeout(1_000) })).ok
  } catch {
    return false
  }
}

/** Resolves when the server says it can work. */
export const untilReady = (url: string): Promise<void> => until('the server is ready', () => isReady(url), 90_000)

export interface ProgramOptions {
  /** Run after the database is seeded and before anything is streamed. */
  prepare?: (databaseUrl: string) => Promise<void>
  variables?: Record<string, string>
  /** With the demonstration's own mail server, as `npm start` has it; it outlives the kills of the server. */
  catchesMail?: boolean
}

export async function startProgram({
  prepare,
  variables = {},
  catchesMail = false,
}: ProgramOptions = {}): Promise<Program> {
  const dataFolder = await mkdtemp(join(tmpdir(), 'offing-run-'))
  const databaseServer = await startMariadb({ durable: true })
  const databaseUrl = `${databaseServer.url}offing_run`
  const outside = createDatabase({ url: databaseServer.url, poolSize: 1 })
  await execute(outside, 'CREATE DATABASE offing_run')
  await outside.close()
  const port = await freePort()
  const url = `http://127.0.0.1:${port}`
  const catcher = catchesMail ? await startMailCatcher({ folder: join(dataFolder, 'mail'), clock: systemClock }) : null
  const secretFile = join(dataFolder, 'jwt-secret')
  await writeFile(secretFile, randomBytes(36).toString('base64url'))
  const env = {
    ...process.env,
    NODE_ENV: 'test',
    INSTALLATION_KIND: 'demonstration',
    HOST: '127.0.0.1',
    PORT: String(port),
    DATABASE_URL: databaseUrl,
    DATA_DIR: dataFolder,
    JWT_SECRET_FILE: secretFile,
    BCRYPT_COST: '4',
    WORKERS: '1',
    ...(catcher && { SMTP_URL: catcher.url }),
    ...variables,
  }
  const logOf = (name: string) => join(dataFolder, `${name}.log`)
  const server = killable(['server/index.ts'], env, logOf('server'))
  const simulators: Killable[] = []

  async function stop(): Promise<void> {
    for (const simulator of simulators) await simulator.kill()
    await server.kill()
    await catcher?.stop()
    await databaseServer.stop()
    await rm(dataFolder, { recursive: true, force: true })
  }

  try {
    await server.start()
    await untilReady(url)
    await prepare?.(databaseUrl)
    const keysFile = join(dataFolder, stationKeysFile)
    const keys = z.record(z.string(), z.string()).parse(JSON.parse(await readFile(keysFile, 'utf8')))
    return {
      url,
      dataFolder,
      databaseUrl,
      databaseServer,
      server,
      keys,
      people: await readDemonstrationPeople(dataFolder),
      async simulator(args) {
        const truthPort = await freePort()
        const name = `simulator-${simulators.length + 1}`
        const wire = ['--url', `${url.replace('http', 'ws')}/telemetry`, '--keys', keysFile]
        const own = ['--state', join(dataFolder, name), '--truth-port', String(truthPort)]
        const simulator = killable(['simulator/index.ts', ...wire, ...own, ...args], process.env, logOf(name))
        simulators.push(simulator)
        return { ...simulator, truthUrl: `http://127.0.0.1:${truthPort}` }
      },
      logOf: (name) => readFile(logOf(name), 'utf8').catch(() => ''),
      stop,
    }
  } catch (error) {
    const log = await readFile(logOf('server'), 'utf8').catch(() => '')
    await stop()
    throw new Error(`The program did not start. The server's log:\n${log.slice(-4_000)}`, { cause: error })
  }
}

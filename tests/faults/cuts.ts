/** Faults other than a kill, each on the running scene: what must be seen while it lasts, and that it passes. */
import type { FaultReport } from '../../server/setup/testReports.ts'
import { untilReady } from '../support/program.ts'
import { until } from '../support/until.ts'
import { check } from './historyChecker.ts'
import type { Scene } from './scene.ts'

type Check = FaultReport['checks'][number]

const pause = (milliseconds: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, milliseconds))

/** 0: no answer at all. */
const statusOf = async (url: string): Promise<number> => {
  try {
    return (await fetch(url, { signal: AbortSignal.timeout(8_000) })).status
  } catch {
    return 0
  }
}

export async function databaseAbsentAtStart({ program, victims }: Scene): Promise<Check[]> {
  await victims.server.kill()
  await victims.database.kill()
  await victims.server.start()
  const alive = async () => (await statusOf(`${program.url}/healthz`)) === 200
  await until('the server lives without a database', alive, 15_000).catch(() => undefined)
  const health = await statusOf(`${program.url}/healthz`)
  const readiness = await statusOf(`${program.url}/readyz`)
  await victims.database.start()
  const recovered = await untilReady(program.url).then(
    () => true,
    () => false,
  )
  return [
    check('without a database the server lives', health === 200, `healthz ${health}`),
    check('without a database the server is not ready', readiness === 503, `readyz ${readiness}`),
    check('the server finds the database when it comes', recovered, 'not ready within 30 s'),
  ]
}

export async function databaseFrozen({ program }: Scene): Promise<Check[]> {
  const database = program.databaseServer.process()
  database.kill('SIGSTOP')
  await pause(3_000)
  const since = performance.now()
  const status = await statusOf(`${program.url}/readyz`)
  const seconds = (performance.now() - since) / 1000
  const health = await statusOf(`${program.url}/healthz`)
  await pause(12_000)
  database.kill('SIGCONT')
  const recovered = await untilReady(program.url).then(
    () => true,
    () => false,
  )
  return [
    check('a frozen database is told by readiness', status === 503, `readyz ${status} after ${seconds.toFixed(1)} s`),
    check('with a frozen database the server lives', health === 200, `healthz ${health}`),
    check('the server works on when the database does', recovered, 'not ready within 30 s'),
  ]
}

export async function serverAskedToEnd({ program, victims }: Scene): Promise<Check[]> {
  const since = performance.now()
  const code = await program.server.end()
  const seconds = (performance.now() - since) / 1000
  await victims.server.start()
  await untilReady(program.url)
  return [check('a server asked to end under load ends well', code === 0, `exit ${code} after ${seconds.toFixed(1)} s`)]
}

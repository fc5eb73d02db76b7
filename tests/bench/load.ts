/**
 * `npm run bench -- --load 200 10`: so many stations of five sensors at 4 Hz for so many minutes from a process of their own, with fifty
 * viewers, against the whole server with its database. The sea of the last twenty minutes lies there before, so that every window is
 * a full one.
 */
import { spawn } from 'node:child_process'
import type { ChildProcess } from 'node:child_process'
import { randomUUID } from 'node:crypto'
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { loadavg, tmpdir } from 'node:os'
import { join } from 'node:path'
import { createInterface } from 'node:readline'
import { systemClock } from '../../server/config/clock.ts'
import { Watermark } from '../../server/models/index.ts'
import { freePort } from '../../server/setup/freePort.ts'
import { makePerson, makeStation, makeStationKey, usualPassword } from '../support/factories.ts'
import { startMariadb } from '../support/mariadb.ts'
import { storeSea, surfaceArray } from '../support/storedSea.ts'
import { until } from '../support/until.ts'
import { benchParts, createBenchSchema } from './benchParts.ts'
import type { LoadOrder, LoadSeen } from './loadStations.ts'

const sampleRate = 4
const viewers = 50
const minuteMs = 60_000

export async function benchLoad(stationCount: number, minutes: number, print: (line: string) => void): Promise<void> {
  const folder = await mkdtemp(join(tmpdir(), 'offing-load-'))
  const database = await startMariadb({ durable: true })
  const url = await createBenchSchema(database)
  let server: ChildProcess | null = null
  try {
    const { stations, emails } = await furnish(url, stationCount)
    const port = await freePort()
    server = startServer(url, port, folder)
    const base = `http://127.0.0.1:${port}`
    await until('the server is ready', async () => (await fetch(`${base}/readyz`).catch(() => null))?.status === 200, 60_000) // prettier-ignore
    const cookies: string[] = []
    for (const email of emails) cookies.push(await signIn(base, email))
    const positions = surfaceArray.positions
    const order: LoadOrder = { url: base, cookies, seconds: minutes * 60, sampleRate, positions, stations }
    await writeFile(join(folder, 'order.json'), JSON.stringify(order))
    await run(server, join(folder, 'order.json'), stationCount, print)
  } finally {
    server?.kill('SIGTERM')
    await database.stop()
    await rm(folder, { recursive: true, force: true })
  }
}

/** Stations with keys and the record of the last twenty-one minutes, whose windows count as dealt with. */
async function furnish(url: string, count: number) {
  const parts = await benchParts(url)
  const now = Math.floor(Date.now() / minuteMs) * minuteMs
  const stations: LoadOrder['stations'] = []
  for (let n = 0; n < count; n++) {
    const made = await makeStation(systemClock, { ...surfaceArray, sampleRate, code: `L${n + 1}` })
    const { key } = await makeStationKey(systemClock, made.station.id)
    await storeSea(made, { from: new Date(now - 21 * minuteMs), to: new Date(now), commitId: 1 })
    const row = { job: 'computeEstimates', subjectKind: 'station', subjectId: made.station.id }
    await Watermark.create({ ...row, doneUpTo: new Date(now), updatedAt: new Date(now) })
    const letters = made.sensors.map(({ letter }) => letter)
    stations.push({ id: made.station.id, code: made.station.code, key, letters })
  }
  const emails: string[] = []
  for (let n = 0; n < viewers; n++) emails.push((await makePerson(systemClock, { role: 'operator' })).email ?? '')
  await parts.sequelize.close()
  return { stations, emails }
}

function startServer(url: string, port: number, folder: string): ChildProcess {
  const env = {
    ...process.env,
    NODE_ENV: 'test',
    INSTALLATION_KIND: 'real',
    DATABASE_URL: url,
    DATA_DIR: join(folder, 'data'),
    PORT: String(port),
    JWT_SECRET: randomUUID() + randomUUID(),
    BCRYPT_COST: '4',
    LOG_LEVEL: 'error',
  }
  return spawn(process.execPath, ['--import', 'tsx', 'server/index.ts'], {
    env,
    stdio: ['ignore', 'ignore', 'inherit'],
  })
}

async function signIn(base: string, email: string): Promise<string> {
  const answer = await fetch(`${base}/api/session`, {
    method: 'POST',
    headers: { 'X-Offing': '1', 'Content-Type': 'application/json', origin: base },
    body: JSON.stringify({ email, password: usualPassword }),
  })
  if (!answer.ok) throw new Error(`signing in: ${answer.status} ${await answer.text()}`)
  return answer.headers.getSetCookie().map((line) => line.split(';')[0]).join('; ') // prettier-ignore
}

interface Spent {
  /** MiB resident. */
  memory: number
  /** Seconds of processor time since its start. */
  worked: number
}

/** Of Linux; a process that is gone has spent nothing. */
async function spentBy({ pid }: ChildProcess): Promise<Spent> {
  const [status, stat] = await Promise.all(
    ['status', 'stat'].map((name) => readFile(`/proc/${pid}/${name}`, 'utf8').catch(() => '')),
  )
  const memory = Number(/VmRSS:\s+(\d+)/.exec(status ?? '')?.[1] ?? 0) / 1024
  const fields = (stat ?? '').slice((stat ?? '').lastIndexOf(')') + 2).split(' ')
  return { memory, worked: (Number(fields[11] ?? 0) + Number(fields[12] ?? 0)) / 100 }
}

async function run(server: ChildProcess, orderFile: string, stations: number, print: (line: string) => void) {
  const load = spawn(process.execPath, ['--import', 'tsx', 'tests/bench/loadStations.ts', orderFile], {
    stdio: ['ignore', 'pipe', 'inherit'],
  })
  const memories: { at: number; memory: number }[] = []
  const before = await spentBy(server)
  print(`${stations} stations of 5 sensors at ${sampleRate} Hz: ${stations * 5 * sampleRate} readings a second; ${viewers} viewers`) // prettier-ignore
  print('    s    sent     acked  ack p50  ack p99  seen p95  oldest estimate  memory  cores  load of the machine')
  let last: Spent = before
  let lastAt = 0
  for await (const line of createInterface({ input: load.stdout })) {
    const seen: LoadSeen = JSON.parse(line)
    const spent = await spentBy(server)
    memories.push({ at: seen.at, memory: spent.memory })
    const cores = seen.at > lastAt ? (spent.worked - last.worked) / (seen.at - lastAt) : 0
    print(rowOf(seen, spent.memory, cores))
    if (!seen.isLast) [last, lastAt] = [spent, seen.at]
    else print(summary(seen, memories))
  }
}

const ms = (value: number): string => `${Math.round(value)} ms`

function rowOf(seen: LoadSeen, memory: number, cores: number): string {
  const columns: [string, number][] = [
    [seen.isLast ? 'all' : String(seen.at), 5],
    [String(seen.sent), 8],
    [String(seen.acknowledged), 10],
    [ms(seen.acknowledgementP50), 9],
    [ms(seen.acknowledgementP99), 9],
    [ms(seen.viewerP95), 10],
    [seen.oldestEstimate === null ? 'none yet' : `${seen.oldestEstimate.toFixed(0)} s`, 17],
    [`${memory.toFixed(0)} MiB`, 8],
    [seen.isLast ? '' : cores.toFixed(2), 7],
    [loadavg()[0]!.toFixed(1), 9],
  ]
  return columns.map(([text, width]) => text.padStart(width)).join('')
}

/** Aims: acknowledgement p99 under 2 s, every newest estimate under 90 s, seen under 1 s at p95, memory that does not grow. */
function summary(seen: LoadSeen, memories: readonly { at: number; memory: number }[]): string {
  const settled = memories.filter(({ at }) => at >= 60)
  const grown = settled.length > 1 ? slopeOf(settled) * 60 : null
  const verdict = (isMet: boolean): string => (isMet ? 'met' : 'NOT met')
  return [
    `acknowledged within ${ms(seen.acknowledgementP99)} at p99 (aim 2 s): ${verdict(seen.acknowledgementP99 < 2000)}`,
    seen.oldestEstimate === null
      ? 'not every station had an estimate yet: run it for two minutes or more'
      : `every station's newest estimate at most ${seen.oldestEstimate.toFixed(0)} s old (aim 90 s): ${verdict(seen.oldestEstimate < 90)}`,
    `from arrival to the viewer ${ms(seen.viewerP95)} at p95 (aim 1 s): ${verdict(seen.viewerP95 < 1000)}`,
    `memory after the first minute ${grown === null ? 'not told' : `${grown >= 0 ? '+' : ''}${grown.toFixed(1)} MiB a minute`}`,
    `lost sockets ${seen.lost}; unacknowledged at the end ${seen.sent - seen.acknowledged}; load of the machine ${loadavg()[0]!.toFixed(1)}`,
  ].join('\n')
}

/** MiB a second, by least squares. */
function slopeOf(points: readonly { at: number; memory: number }[]): number {
  const meanAt = points.reduce((sum, { at }) => sum + at, 0) / points.length
  const mean = points.reduce((sum, { memory }) => sum + memory, 0) / points.length
  const across = points.reduce((sum, { at }) => sum + (at - meanAt) ** 2, 0)
  return across > 0 ? points.reduce((sum, { at, memory }) => sum + (at - meanAt) * (memory - mean), 0) / across : 0
}

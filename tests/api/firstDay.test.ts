/** An administrator's first day by the routes alone: station, array, key, a simulator with that key, an estimate. */
import { spawn } from 'node:child_process'
import type { ChildProcess } from 'node:child_process'
import { mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { systemClock } from '../../server/config/clock.ts'
import type { Parts } from '../../server/config/parts.ts'
import { startComputeEstimates } from '../../server/jobs/computeEstimates.ts'
import type { ComputeEstimates } from '../../server/jobs/computeEstimates.ts'
import { signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import { draftContent, stationDraft } from '../support/stationSetUp.ts'
import { serveTelemetry } from '../support/telemetry.ts'
import type { TelemetryServer } from '../support/telemetry.ts'
import { until } from '../support/until.ts'

const root = fileURLToPath(new URL('../..', import.meta.url))
let parts: Parts
let browser: Browser
let telemetry: TelemetryServer
let job: ComputeEstimates
let folder: string
let simulator: ChildProcess | undefined

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'offing-first-day-'))
  parts = { ...(await testParts()), clock: systemClock }
  const app = createApp(parts)
  browser = await signedIn(app, (await makePerson(parts.clock, { role: 'admin' })).email)
  telemetry = await serveTelemetry(parts)
  job = await startComputeEstimates(parts)
})
afterAll(async () => {
  simulator?.kill()
  await job.stop()
  await telemetry.stop()
  await rm(folder, { recursive: true, force: true })
})

async function simulate(station: number, key: string): Promise<void> {
  const file = (await browser.get(`/api/stations/${station}/stationFile`).expect(200)).body
  const [stationPath, keysPath] = [join(folder, 'station.json'), join(folder, 'keys.json')]
  await writeFile(stationPath, JSON.stringify(file))
  await writeFile(keysPath, JSON.stringify({ [file.code]: key }))
  const words = [
    '--station-file',
    stationPath,
    '--url',
    `${telemetry.url}/telemetry`,
    '--keys',
    keysPath,
    '--backfill',
    '6m',
  ]
  simulator = spawn(process.execPath, ['--import', 'tsx', 'simulator/index.ts', ...words], {
    cwd: root,
    stdio: 'ignore',
  })
}

const first = async (path: string) => (await browser.get(path).expect(200)).body[0]

/** A busy machine takes its time to start a process and to estimate. */
const patience = 60_000

test(
  'station, array, key and a simulator that connects with it give an estimate, and the link says what arrives',
  { timeout: 2 * patience },
  async () => {
    const { body: station } = await browser.post('/api/stations').send(stationDraft('NEW')).expect(201)
    const path = `/api/stations/${station.id}`
    const draft = (await browser.post(`${path}/deploymentDrafts`).send({ basedOnId: null, correctsId: null, content: draftContent() }).expect(201)).body // prettier-ignore
    // The array stood there before the readings begin.
    const order = { validFrom: new Date(Date.now() - 3_600_000).toISOString(), reason: 'First survey', resolved: [] }
    await browser.post(`${path}/deploymentDrafts/${draft.id}/putInForce`).set('If-Match', '"1"').send(order).expect(201)
    const { body: issued } = await browser.post(`${path}/keys`).send({ validUntil: null }).expect(201)

    await simulate(station.id, issued.key)
    await until(
      'the station streams',
      async () => (await first(`${path}/connections`))?.reached === 'streaming',
      patience,
    )
    const attempt = await first(`${path}/connections`)
    expect(attempt).toMatchObject({ keyState: 'valid', keyPrefix: issued.prefix, trouble: null, differences: [], refusals: [] }) // prettier-ignore
    expect(attempt.hello.sensors).toHaveLength(5)
    await until('an estimate with a vector', async () => (await browser.get(path)).body.lastGood !== null, patience)
    const { lastGood } = (await browser.get(path).expect(200)).body
    expect(lastGood).toMatchObject({ resolved: true, sensorsUsed: 5 })
    const link = (await browser.get(`${path}/link`).expect(200)).body
    expect(link).toMatchObject({ sampleRate: 4, link: { state: 'connected' } })
    expect(link.sensors.map(({ letter, newestValue }: { letter: string; newestValue: number | null }) => [letter, newestValue !== null])).toEqual(['A', 'B', 'C', 'D', 'E'].map((letter) => [letter, true])) // prettier-ignore
    expect((await first(`${path}/keys`)).lastUsedAt).not.toBeNull()
  },
)

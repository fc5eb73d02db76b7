/** The demonstration, once the packages are there: a story from an empty folder to a live page, and its end. */
import { existsSync } from 'node:fs'
import { join } from 'node:path'
import { systemClock } from '../config/clock.ts'
import { startMailCatcher } from '../mail/mailCatcher.ts'
import { buildClient, staleClient } from './clientBuild.ts'
import { makeSecret } from './databaseFolder.mjs'
import { peopleLines, readDemonstrationPeople, stationKeysFile } from './demonstrationPeople.ts'
import { requirePort } from './freePort.ts'
import { startOwnDatabase } from './ownDatabase.ts'
import { RunningParts } from './parts.ts'
import { PlainFailure } from './plainFailure.mjs'
import { dataFolder, root } from './prepare.mjs'
import { step } from './progress.mjs'
import { runProgram } from './runProgram.mjs'
import { readStartSettings } from './startSettings.ts'
import type { StartSettings } from './startSettings.ts'
import { stopWhenAsked } from './stopWhenAsked.ts'
import { waitForPage } from './waitForPage.ts'

const serverScript = 'server/index.ts'
const simulatorScript = 'simulator/index.ts'
const say = (sentence: string): void => console.log(`  ${sentence}`)

export async function startDemonstration(): Promise<void> {
  const secretFile = join(dataFolder, 'jwt-secret')
  await makeSecret(secretFile)
  const settings = readStartSettings(process.env, dataFolder, secretFile)
  const parts = new RunningParts({ root, dataFolder, say })
  const asked = stopWhenAsked(parts)
  try {
    await bringUp(settings, parts)
  } catch (error) {
    if (asked.stopping()) return
    await parts.stop()
    throw error
  }
  console.log('\nCtrl-C stops all of it in order; a second Ctrl-C at once.')
}

async function bringUp(settings: StartSettings, parts: RunningParts): Promise<void> {
  const { host, port, publicUrl } = settings.environment
  const address = `http://${host.includes(':') ? `[${host}]` : host}:${port}`
  await parts.endOrphan('simulator', simulatorScript)
  await parts.endOrphan('server', serverScript)
  await requirePort(port, host, 'PORT')
  // Building and making the past take seconds and the server needs neither to begin: all side by side.
  const variables: NodeJS.ProcessEnv = { ...settings.variables, PUBLIC_URL: publicUrl }
  const [server] = await Promise.all([startServer(settings, parts, variables), makeClient(), makePast(settings)])
  await step('page', () => waitForPage(address, server))
  await startSimulator(settings, parts, address)
  console.log(`\nOffing, demonstration: ${publicUrl}\n`)
  for (const line of peopleLines(await readDemonstrationPeople(dataFolder))) console.log(line)
}

async function startServer(settings: StartSettings, parts: RunningParts, variables: NodeJS.ProcessEnv) {
  if (settings.ownDatabase) {
    const database = await step('database', () =>
      startOwnDatabase(join(dataFolder, 'database'), { port: settings.databasePort ?? undefined, say }),
    )
    await parts.add('database', database)
    variables.DATABASE_URL = database.url
  }
  if (settings.ownMailCatcher) {
    const catcher = await startMailCatcher({ folder: join(dataFolder, 'mail'), clock: systemClock })
    await parts.add('mail catcher', catcher)
    variables.SMTP_URL = catcher.url
  }
  return parts.launch('server', serverScript, [], variables)
}

async function makeClient(): Promise<void> {
  const stale = await staleClient(root)
  if (stale !== null) await step('client', () => buildClient(root, stale))
}

/** Twelve hours of the demonstration's readings and a year of its seas, once. */
async function makePast({ environment, scenario, backfill }: StartSettings): Promise<void> {
  const folder = environment.demonstrationPastFolder
  if (folder === null || existsSync(join(folder, 'manifest.json'))) return
  const args = [
    '--import',
    'tsx',
    simulatorScript,
    '--write-past',
    folder,
    '--scenario',
    scenario,
    '--backfill',
    backfill,
  ]
  await step('the demonstration’s past', async (note) => {
    const { code, tail } = await runProgram(process.execPath, args, { cwd: root, onLine: note })
    if (code === 0) return
    if (/ENOSPC/.test(tail))
      throw new PlainFailure(`The disk is full: no room for the demonstration's past in ${folder}.`)
    throw new PlainFailure(`The demonstration's past could not be made:\n${tail}`)
  })
}

async function startSimulator(settings: StartSettings, parts: RunningParts, address: string): Promise<void> {
  const past = settings.environment.demonstrationPastFolder
  const manifest = past === null ? null : join(past, 'manifest.json')
  const sea = manifest && existsSync(manifest) ? ['--continue', manifest] : ['--scenario', settings.scenario]
  await parts.launch(
    'simulator',
    simulatorScript,
    [
      ...sea,
      ...['--url', `${address.replace(/^http/, 'ws')}/telemetry`],
      ...['--keys', join(dataFolder, stationKeysFile)],
      ...['--state', join(dataFolder, 'simulator')],
      ...['--backfill', settings.backfill],
    ],
    process.env,
  )
}

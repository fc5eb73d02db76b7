/** The demonstration, once the npm packages are there: a story from an empty folder to a live page, and its end. */
import { join } from 'node:path'
import { systemClock } from '../config/clock.ts'
import { startMailCatcher } from '../mail/mailCatcher.ts'
import { makeSecret } from './databaseFolder.mjs'
import { peopleLines, readDemonstrationPeople, stationKeysFile } from './demonstrationPeople.ts'
import { requirePort } from './freePort.ts'
import { endOfPast, makeClient, makePast } from './makeOnce.ts'
import { startOwnDatabase } from './ownDatabase.ts'
import { RunningParts } from './parts.ts'
import { dataFolder, root } from './prepare.mjs'
import { step } from './progress.mjs'
import { readStartSettings } from './startSettings.ts'
import type { StartSettings } from './startSettings.ts'
import { stopWhenAsked } from './stopWhenAsked.ts'
import type { Supervised } from './supervise.ts'
import { earlyEnd, untilPageAnswers } from './waitForPage.ts'

const serverScript = 'server/index.ts'
const simulatorScript = 'simulator/index.ts'
/** Readings of the past that are younger than this reach into the first live windows. */
const backfillMilliseconds = 25 * 60_000
const say = (sentence: string): void => console.log(`  ${sentence}`)

/** `databaseIsThere`: MariaDB and the folder for it may still be on their way. */
export async function startDemonstration(databaseIsThere: Promise<void>): Promise<void> {
  const secretFile = join(dataFolder, 'jwt-secret')
  await makeSecret(secretFile)
  const settings = readStartSettings(process.env, dataFolder, secretFile)
  const parts = new RunningParts({ root, dataFolder, say })
  const asked = stopWhenAsked(parts)
  try {
    await bringUp(settings, parts, databaseIsThere)
  } catch (error) {
    if (asked.stopping()) return
    await parts.stop()
    throw error
  }
}

async function bringUp(settings: StartSettings, parts: RunningParts, databaseIsThere: Promise<void>): Promise<void> {
  const { host, port, publicUrl } = settings.environment
  const address = `http://${host.includes(':') ? `[${host}]` : host}:${port}`
  await parts.endOrphan('simulator', simulatorScript)
  await parts.endOrphan('server', serverScript)
  await requirePort(port, host, 'PORT')
  // Building and making the past take seconds, and the server needs neither to begin: all side by side.
  const client = makeClient(root)
  const past = makePast(root, settings.pastFolder, simulatorScript, settings.scenario)
  const failure = Promise.race([failureOf(client), failureOf(past)])
  const variables = { ...settings.variables, PUBLIC_URL: publicUrl }
  const server = await Promise.race([startServer(settings, parts, variables, databaseIsThere), failure])
  const trouble = Promise.race([failure, earlyEnd(server)])
  await Promise.race([client, trouble])
  await step('page', () => Promise.race([untilPageAnswers(address), trouble]))
  server.keep()
  console.log(`\nOffing, demonstration: ${publicUrl}\n`)
  for (const line of peopleLines(await readDemonstrationPeople(dataFolder))) console.log(line)
  console.log('\nCtrl-C stops all of it in order; a second Ctrl-C at once.\n')
  await past
  await startSimulator(settings, parts, address)
  say(`The stations send. What the parts write down: ${join(dataFolder, 'log')}`)
}

/** Never resolves; rejects as the work does. */
const failureOf = (work: Promise<void>): Promise<never> => work.then(() => new Promise<never>(() => undefined))

async function startServer(
  settings: StartSettings,
  parts: RunningParts,
  variables: NodeJS.ProcessEnv,
  databaseIsThere: Promise<void>,
): Promise<Supervised> {
  await databaseIsThere
  if (settings.ownDatabase) {
    const folder = join(dataFolder, 'database')
    const database = await step('database', () => startOwnDatabase(folder, { port: settings.databasePort, say }))
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

/** Goes on where the past ends; when that is long ago, begins far enough back for a first window. */
async function startSimulator(
  { pastFolder, backfill }: StartSettings,
  parts: RunningParts,
  address: string,
): Promise<void> {
  const pastEnd = (await endOfPast(pastFolder)) ?? 0
  const followsPast = systemClock.now().getTime() - pastEnd < backfillMilliseconds
  const simulator = await parts.launch(
    'simulator',
    simulatorScript,
    [
      ...['--continue', join(pastFolder, 'manifest.json')],
      ...['--url', `${address.replace(/^http/, 'ws')}/telemetry`],
      ...['--keys', join(dataFolder, stationKeysFile)],
      ...['--state', join(dataFolder, 'simulator')],
      ...(followsPast ? [] : ['--backfill', backfill]),
    ],
    process.env,
  )
  simulator.keep()
}

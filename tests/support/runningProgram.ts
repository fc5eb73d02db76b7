/** Runs once before the browser tests: the program with its own database, a quiet sea, one Chromium. */
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { fileURLToPath } from 'node:url'
import { chromium } from 'playwright-core'
import type { TestProject } from 'vitest/node'
import { buildClient, staleClient } from '../../server/setup/clientBuild.ts'
import { debianNeeds, findProgram } from '../../server/setup/debianPackages.mjs'
import type { DemonstrationPerson } from '../../server/setup/demonstrationPeople.ts'
import { startProgram, untilReady } from './program.ts'
import type { Killable, Program } from './program.ts'

declare module 'vitest' {
  interface ProvidedContext {
    programUrl: string
    programDatabaseUrl: string
    truthUrl: string
    people: DemonstrationPerson[]
    browserEndpoint: string
    /** POST /server/kill, /server/start, /simulator/kill, /simulator/start */
    controlUrl: string
  }
}

const root = fileURLToPath(new URL('../..', import.meta.url))
/** The program answers on loopback; nothing that the browser does by itself may leave the machine. */
const browserArguments = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
]

async function launchBrowser() {
  const executablePath = findProgram('chromium')
  if (!executablePath) throw new Error(`chromium is missing: install Debian's package ${debianNeeds.chromium.package}`)
  return chromium.launchServer({ executablePath, args: browserArguments })
}

/** The tests run in a process of their own and ask here for what only this one can do. */
async function serveControl(parts: Record<string, Killable>, program: Program) {
  const control = createServer((request, response) => {
    const [, name = '', verb = ''] = (request.url ?? '').split('/')
    const part = parts[name]
    const act = verb === 'kill' ? part?.kill() : verb === 'start' ? part?.start() : undefined
    Promise.resolve(act)
      .then(() => (name === 'server' && verb === 'start' ? untilReady(program.url) : undefined))
      .then(
        () => response.writeHead(act ? 204 : 404).end(),
        (error: Error) => response.writeHead(500).end(error.message),
      )
  })
  await new Promise<void>((resolve) => control.listen(0, '127.0.0.1', resolve))
  return { url: `http://127.0.0.1:${(control.address() as AddressInfo).port}`, close: () => control.close() }
}

export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const stale = await staleClient(root)
  if (stale !== null) await buildClient(root, stale)
  const program = await startProgram({ catchesMail: true })
  const browser = await launchBrowser()
  const simulator = await program.simulator(['--scenario', 'quiet', '--backfill', '25m'])
  await simulator.start()
  const control = await serveControl({ server: program.server, simulator }, program)
  project.provide('programUrl', program.url)
  project.provide('programDatabaseUrl', program.databaseUrl)
  project.provide('truthUrl', simulator.truthUrl)
  project.provide('people', program.people)
  project.provide('browserEndpoint', browser.wsEndpoint())
  project.provide('controlUrl', control.url)
  return async () => {
    control.close()
    await browser.close()
    await program.stop()
  }
}

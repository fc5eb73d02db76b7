import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, expect, test } from 'vitest'
import { isAlive } from '../../server/setup/processLikeness.mjs'
import { endOrphan } from '../../server/setup/processes.ts'
import { supervise } from '../../server/setup/supervise.ts'
import type { Supervised } from '../../server/setup/supervise.ts'
import { until } from '../support/until.ts'

let folder: string
let supervised: Supervised | null = null
const said: string[] = []

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'offing-supervise-'))
  said.length = 0
})
afterEach(async () => {
  supervised?.kill()
  supervised = null
  await rm(folder, { recursive: true })
})

const pidFile = () => join(folder, 'part.pid')
const start = async (script: string) => {
  supervised = await supervise(
    {
      name: 'The part',
      command: process.execPath,
      args: ['-e', script],
      env: process.env,
      folder,
      logFile: join(folder, 'part.log'),
      pidFile: pidFile(),
      patienceMilliseconds: 600,
    },
    (sentence) => said.push(sentence),
  )
  return supervised
}
const pid = async () => Number(await readFile(pidFile(), 'utf8').catch(() => '0'))
const newPid = async (old: number) => {
  await until('a process with another pid', async () => (await pid()) !== old && (await pid()) > 0, 10_000)
  return pid()
}
const stays = 'setInterval(() => undefined, 1000)'

test('a program killed from outside is told of and started again', async () => {
  const part = await start(stays)
  part.keep()
  const first = await newPid(0)
  process.kill(first, 'SIGKILL')
  const second = await newPid(first)
  expect(isAlive(second)).toBe(true)
  expect(said).toHaveLength(1)
  expect(said[0]).toMatch(/^The part ended \(SIGKILL\); it is started again in 0\.5 s\./)
})

test('a program that ends before it has come up is not started again, and its last words are known', async () => {
  const { firstEnd } = await start("console.error('The port is busy.'); process.exit(1)")
  expect(await firstEnd).toEqual({ how: 'exit 1', tail: 'The port is busy.' })
  expect(said).toEqual([])
})

test('a program that is stopped ends, stays ended and leaves no pid file', async () => {
  const part = await start(stays)
  const first = await newPid(0)
  await part.stop()
  expect(isAlive(first)).toBe(false)
  expect(await pid()).toBe(0)
  expect(said).toEqual([])
})

test('a program that does not hear is ended after its patience', async () => {
  const part = await start(`process.on('SIGTERM', () => undefined); console.log('deaf'); ${stays}`)
  const first = await newPid(0)
  await until('it is deaf', async () => (await readFile(join(folder, 'part.log'), 'utf8')).includes('deaf'), 10_000)
  await part.stop()
  expect(isAlive(first)).toBe(false)
})

test('what a killed start left running is found by its pid file and ended, a stranger with that pid is not', async () => {
  await start(stays)
  const first = await newPid(0)
  expect(await endOrphan(pidFile(), { argument: 'another program' }, 2_000)).toBe(false)
  expect(isAlive(first)).toBe(true)
  await writeFile(pidFile(), String(first))
  expect(await endOrphan(pidFile(), { argument: stays, folder }, 2_000)).toBe(true)
  expect(isAlive(first)).toBe(false)
})

/** The station in thirty lines that the README gives must work as it stands there. */
import { spawn } from 'node:child_process'
import { mkdir, readFile, rm, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { createDatabase } from '../../server/config/database.ts'
import { select } from '../../server/models/sql.ts'
import { demonstrationStations } from '../../shared/demonstration/stations.ts'
import { startProgram } from '../support/program.ts'
import type { Program } from '../support/program.ts'
import { until } from '../support/until.ts'

const root = fileURLToPath(new URL('../..', import.meta.url))
const folder = join(root, 'var', 'test-example')
let program: Program

beforeAll(async () => {
  program = await startProgram()
  await mkdir(folder, { recursive: true })
})
afterAll(async () => {
  await program?.stop()
  await rm(folder, { recursive: true, force: true })
})

async function exampleOfReadme(): Promise<string> {
  const readme = await readFile(join(root, 'README.md'), 'utf8')
  const source = /```js\n(\/\/ node station\.mjs[\s\S]*?)```/.exec(readme)?.[1]
  if (!source) throw new Error('README.md has no example of a station')
  return source
}

test('the example of the README connects as a station and its readings are acknowledged and stored', async () => {
  const path = join(folder, 'station.mjs')
  await writeFile(path, await exampleOfReadme())
  const { code, sampleRate, sensors } = demonstrationStations[0]!
  const letters = sensors.map(({ letter }) => letter)
  const wire = [`${program.url.replace('http', 'ws')}/telemetry`, code, program.keys[code] ?? '', String(sampleRate)]
  const station = spawn(process.execPath, [path, ...wire, 'pressure', 'dbar', ...letters], {
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  let said = ''
  for (const stream of [station.stdout, station.stderr]) stream.on('data', (text) => (said += String(text)))
  const sequelize = createDatabase({ url: program.databaseUrl, poolSize: 1 })
  const stored = async () => {
    const rows = await select<{ count: number }>(sequelize, 'SELECT COUNT(*) AS count FROM frames', {})
    return Number(rows[0]?.count) >= 3
  }
  try {
    await until('three frames of the example are stored', stored, 15_000).catch((error) => {
      throw new Error(`${error.message}; it said: ${said}`)
    })
    expect(said).toContain('welcome')
    expect(said).not.toMatch(/refused|\b44\d\d\b|Error/)
  } finally {
    station.kill()
    await sequelize.close()
  }
})

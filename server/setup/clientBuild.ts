/** The built client, made again when anything it is made from has changed. */
import { createHash } from 'node:crypto'
import { readdir, readFile, writeFile } from 'node:fs/promises'
import { join, relative } from 'node:path'
import { PlainFailure } from './plainFailure.mjs'
import { runProgram } from './runProgram.mjs'

const sources = ['src', 'shared', 'index.html', 'vite.config.ts', 'package-lock.json']
const stampName = 'dist/.made-from'

async function filesUnder(path: string): Promise<string[]> {
  const entries = await readdir(path, { withFileTypes: true, recursive: true }).catch(() => null)
  if (entries === null) return [path]
  return entries.filter((entry) => entry.isFile()).map((entry) => join(entry.parentPath, entry.name))
}

export async function fingerprintOfSources(root: string): Promise<string> {
  const files = (await Promise.all(sources.map((source) => filesUnder(join(root, source))))).flat().sort()
  const hash = createHash('sha256')
  for (const file of files)
    hash
      .update(`${relative(root, file)}\0`)
      .update(await readFile(file))
      .update('\0')
  return hash.digest('hex')
}

/** Answers the fingerprint to build for, or null when the built client is of these sources. */
export async function staleClient(root: string): Promise<string | null> {
  const wanted = await fingerprintOfSources(root)
  const made = await readFile(join(root, stampName), 'utf8').catch(() => '')
  return made.trim() === wanted ? null : wanted
}

export async function buildClient(root: string, wanted: string): Promise<void> {
  const { code, tail } = await runProgram(
    process.execPath,
    [join(root, 'node_modules/vite/bin/vite.js'), 'build', '--logLevel', 'warn'],
    { cwd: root, env: { ...process.env, NODE_ENV: 'production', NO_COLOR: '1' } },
  )
  if (code !== 0) {
    if (/ENOSPC/.test(tail)) throw new PlainFailure('The disk is full: the client could not be built.')
    throw new PlainFailure(`The client could not be built:\n${tail}`)
  }
  await writeFile(join(root, stampName), `${wanted}\n`)
}

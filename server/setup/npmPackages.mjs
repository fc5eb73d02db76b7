import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { PlainFailure } from './plainFailure.mjs'
import { runProgram } from './runProgram.mjs'

/**
 * Are the packages on disk those of the lock? npm leaves its own list in node_modules as the last thing it does, so a
 * half-finished installation has none. Optional packages of other machines may be absent.
 * @param {string} root
 */
export async function packagesAreAsLocked(root) {
  try {
    const [locked, installed] = await Promise.all(
      ['package-lock.json', 'node_modules/.package-lock.json'].map(async (path) =>
        JSON.parse(await readFile(join(root, path), 'utf8')),
      ),
    )
    return Object.entries(locked.packages).every(([path, entry]) => {
      if (path === '') return true
      const present = installed.packages[path]
      return present ? present.version === entry.version : Boolean(entry.optional || entry.devOptional)
    })
  } catch {
    return false
  }
}

/**
 * Installs exactly what the lock says.
 * @param {string} root
 */
export async function installPackages(root) {
  const { code, tail } = await runProgram(
    'npm',
    ['ci', '--prefer-offline', '--no-audit', '--no-fund', '--loglevel=error'],
    {
      cwd: root,
    },
  )
  if (code === 0) return
  if (/ENOSPC/.test(tail)) throw new PlainFailure('The disk is full: npm could not unpack the packages.')
  if (/EACCES|EPERM/.test(tail))
    throw new PlainFailure(`A right is missing: npm may not write to ${join(root, 'node_modules')}.`)
  throw new PlainFailure(`npm ci failed. Its last words:\n${tail}`)
}

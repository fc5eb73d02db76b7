import { existsSync } from 'node:fs'
import { mkdir, stat, statfs } from 'node:fs/promises'
import { dirname, join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'
import { initialiseDatabaseFolder } from './databaseFolder.mjs'
import { findProgram, installDebianPackages } from './debianPackages.mjs'
import { installPackages, packagesAreAsLocked } from './npmPackages.mjs'
import { PlainFailure } from './plainFailure.mjs'
import { step } from './progress.mjs'

export const root = resolve(dirname(fileURLToPath(import.meta.url)), '../..')
export const dataFolder = resolve(root, process.env.DATA_DIR || 'var')

const leastRoom = 700 * 1024 * 1024

/** Says at once what would otherwise fail in the middle: no right to write, no room. */
export async function checkDataFolder() {
  await mkdir(dataFolder, { recursive: true, mode: 0o700 })
  const user = process.getuid?.()
  const owner = (await stat(dataFolder)).uid
  if (user !== undefined && user !== 0 && user !== owner) {
    throw new PlainFailure(
      `${dataFolder} belongs to another user (number ${owner}): start as that user, or set DATA_DIR.`,
    )
  }
  const { bavail, bsize } = await statfs(dataFolder)
  if (bavail * bsize < leastRoom) {
    throw new PlainFailure(
      `The disk is full: ${dataFolder} needs ${leastRoom / 1024 / 1024} MB free, and less is left.`,
    )
  }
}

/** npm packages as locked. */
export async function bringPackages() {
  if (!(await packagesAreAsLocked(root))) await step('npm packages', () => installPackages(root))
}

/**
 * Debian's packages that are missing and, as soon as MariaDB is there, the folder of a database of our own.
 * @param {{ needs: { package: string, programs: string[] }[], ownDatabase: boolean }} wanted
 */
export async function bringPrograms({ needs, ownDatabase }) {
  const missing = needs.filter((need) => need.programs.some((name) => !findProgram(name)))
  if (missing.length) {
    const names = missing.map((need) => need.package).join(', ')
    await step(`Debian: ${names}`, (note) => installDebianPackages(needs, note))
  }
  const folder = join(dataFolder, 'database')
  if (ownDatabase && !existsSync(join(folder, 'data')))
    await step('database folder', () => initialiseDatabaseFolder(folder))
}

/**
 * Goes on as soon as the packages are there; the programs may still be on their way, but a failure of theirs is told at
 * once.
 * @param {Promise<void>} packages
 * @param {Promise<void>} programs
 */
export const packagesUnless = (packages, programs) => Promise.race([packages, programs.then(() => packages)])

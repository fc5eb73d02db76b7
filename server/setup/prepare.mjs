import { existsSync } from 'node:fs'
import { mkdir, stat, statfs } from 'node:fs/promises'
import { dirname, join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'
import { initialiseDatabaseFolder } from './databaseFolder.mjs'
import { debianNeeds, findProgram, installDebianPackages } from './debianPackages.mjs'
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

/**
 * Brings in what is missing, side by side: npm packages, Debian's packages and, as soon as MariaDB is there, the
 * folder of a database of our own.
 * @param {{ chromium: boolean, ownDatabase: boolean }} wanted
 */
export async function prepare({ chromium, ownDatabase }) {
  const needs = [...(ownDatabase ? [debianNeeds.mariadb] : []), ...(chromium ? [debianNeeds.chromium] : [])]
  const missing = needs.filter((need) => need.programs.some((name) => !findProgram(name)))
  const results = await Promise.allSettled([
    packagesAreAsLocked(root).then((done) => (done ? undefined : step('npm packages', () => installPackages(root)))),
    (async () => {
      if (missing.length)
        await step(`Debian: ${missing.map((need) => need.package).join(', ')}`, (note) =>
          installDebianPackages(needs, note),
        )
      const folder = join(dataFolder, 'database')
      if (ownDatabase && !existsSync(join(folder, 'data')))
        await step('database folder', () => initialiseDatabaseFolder(folder))
    })(),
  ])
  const failures = results.flatMap((result) => (result.status === 'rejected' ? [result.reason] : []))
  if (failures.length === 0) return
  const unforeseen = failures.find((failure) => !(failure instanceof PlainFailure))
  throw unforeseen ?? new PlainFailure(failures.map((failure) => failure.message).join('\n\n'))
}

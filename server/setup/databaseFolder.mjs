import { randomBytes } from 'node:crypto'
import { existsSync } from 'node:fs'
import { mkdir, open, readFile, rename, rm } from 'node:fs/promises'
import { userInfo } from 'node:os'
import { join } from 'node:path'
import { findProgram } from './debianPackages.mjs'
import { PlainFailure } from './plainFailure.mjs'
import { runProgram } from './runProgram.mjs'

/**
 * A server that starts clears temporary tables away, those of other servers too where they share a folder: ours has one
 * of its own.
 * @param {string} folder
 */
export const temporaryFolder = (folder) => join(folder, 'tmp')

/** @param {string} folder */
const makeTemporaryFolder = (folder) => mkdir(temporaryFolder(folder), { recursive: true, mode: 0o700 })

/**
 * Makes the folder of a database of our own, once: tables of MariaDB itself and a password for our user. A run that
 * was cut short leaves only `unfinished`, never half a database.
 * @param {string} folder
 */
export async function initialiseDatabaseFolder(folder) {
  await mkdir(folder, { recursive: true, mode: 0o700 })
  await makeTemporaryFolder(folder)
  await makeSecret(join(folder, 'password'))
  if (existsSync(join(folder, 'data'))) return
  const unfinished = join(folder, 'unfinished')
  await rm(unfinished, { recursive: true, force: true })
  const user = userInfo().username
  const { code, tail } = await runProgram(findProgram('mariadb-install-db') ?? 'mariadb-install-db', [
    '--no-defaults',
    ...(process.getuid?.() === 0 ? ['--user=root'] : []),
    `--datadir=${unfinished}`,
    `--tmpdir=${temporaryFolder(folder)}`,
    '--auth-root-authentication-method=socket',
    `--auth-root-socket-user=${user}`,
    '--skip-test-db',
    '--skip-name-resolve',
  ])
  if (code !== 0) {
    if (/No space left|errno: 28|Error 28/i.test(tail))
      throw new PlainFailure(`The disk is full: no room for a database in ${folder}.`)
    throw new PlainFailure(`The database could not be made in ${folder}. MariaDB's last words:\n${tail}`)
  }
  await rename(unfinished, join(folder, 'data'))
}

/**
 * Makes a secret for the owner's eyes alone, unless it is there already.
 * @param {string} path
 * @returns {Promise<string>}
 */
export async function makeSecret(path) {
  try {
    const file = await open(path, 'wx', 0o600)
    const secret = randomBytes(36).toString('base64url')
    await file.writeFile(secret + '\n')
    await file.close()
    return secret
  } catch (error) {
    if (!(error instanceof Error && 'code' in error && error.code === 'EEXIST')) throw error
    return (await readFile(path, 'utf8')).trim()
  }
}

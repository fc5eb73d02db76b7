import { accessSync, constants } from 'node:fs'
import { delimiter, join } from 'node:path'
import { PlainFailure } from './plainFailure.mjs'
import { runProgram } from './runProgram.mjs'

/** What the program needs of Debian, and how one sees that it is there. */
export const debianNeeds = {
  mariadb: { package: 'mariadb-server', programs: ['mariadbd', 'mariadb-install-db'] },
  chromium: { package: 'chromium', programs: ['chromium'] },
}

/**
 * Where a program is, looked for in PATH and in the folders of system programs that an ordinary PATH leaves out.
 * @param {string} name
 * @returns {string | null}
 */
export function findProgram(name) {
  const folders = [...(process.env.PATH ?? '').split(delimiter), '/usr/local/sbin', '/usr/sbin', '/sbin']
  for (const folder of folders.filter(Boolean)) {
    const path = join(folder, name)
    try {
      accessSync(path, constants.X_OK)
      return path
    } catch {
      continue
    }
  }
  return null
}

/**
 * Installs the missing Debian packages as root; anybody else gets the exact command.
 * @param {{ package: string, programs: string[] }[]} needs
 * @param {(text: string) => void} [note]
 */
export async function installDebianPackages(needs, note = () => {}) {
  const missing = needs.filter((need) => need.programs.some((name) => !findProgram(name))).map((need) => need.package)
  if (missing.length === 0) return
  const names = missing.join(' ')
  if (process.getuid?.() !== 0) {
    throw new PlainFailure(
      `Missing on this machine: ${names}. As root run\n  apt-get update && apt-get install --yes ${names}\nand start again.`,
    )
  }
  if (!findProgram('apt-get'))
    throw new PlainFailure(`Missing on this machine: ${names}, and there is no apt-get to install it.`)
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive', LC_ALL: 'C' }
  const lock = ['-o', 'DPkg::Lock::Timeout=300', '-o', 'Acquire::Retries=2']
  /** @param {string[]} args */
  const apt = (args) => runProgram('apt-get', [...lock, ...args], { env, onLine: note })
  const install = ['install', '--yes', '--no-install-recommends', ...missing]
  // Fresh lists save an update; stale ones name packages that are gone, so then once more with new lists.
  if ((await apt(install)).code === 0) return
  const update = await apt(['update'])
  const again = await apt(install)
  if (again.code === 0) return
  throw new PlainFailure(
    `apt-get could not install ${names}. Its last words:\n${[update.tail, again.tail].join('\n').split('\n').slice(-12).join('\n')}`,
  )
}

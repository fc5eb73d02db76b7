/** Processes of an earlier start, known by the pid they left and checked by what they were started as. */
import { readFile, readlink } from 'node:fs/promises'

/**
 * @param {number} pid
 * @returns {boolean}
 */
export function isAlive(pid) {
  try {
    process.kill(pid, 0)
    return true
  } catch (error) {
    return error instanceof Error && 'code' in error && error.code === 'EPERM'
  }
}

/**
 * What a living process must show to be taken for the one that left the pid, since numbers are given away again: a part
 * of its command line, and the folder it works in where that matters.
 * @typedef {{ argument: string, folder?: string }} Likeness
 */

/**
 * @param {number} pid
 * @param {Likeness} likeness
 */
async function looksLike(pid, { argument, folder }) {
  try {
    const commandLine = (await readFile(`/proc/${pid}/cmdline`, 'utf8')).split('\0')
    if (!commandLine.some((part) => part.includes(argument))) return false
    return folder === undefined || (await readlink(`/proc/${pid}/cwd`)) === folder
  } catch {
    return false
  }
}

/**
 * The pid in a file when that process still lives and looks right, else null.
 * @param {string} path
 * @param {Likeness} likeness
 * @returns {Promise<number | null>}
 */
export async function pidInFile(path, likeness) {
  const pid = Number.parseInt(await readFile(path, 'utf8').catch(() => ''), 10)
  if (!Number.isInteger(pid) || pid <= 1 || pid === process.pid || !isAlive(pid)) return null
  return (await looksLike(pid, likeness)) ? pid : null
}

/** Processes of an earlier start, known by the pid they left and checked by what they were started as. */
import { readFile, readlink, rm, writeFile } from 'node:fs/promises'

const pollMilliseconds = 50

const pause = (milliseconds: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, milliseconds))

export function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0)
    return true
  } catch (error) {
    return error instanceof Error && 'code' in error && error.code === 'EPERM'
  }
}

/** What a living process must show to be taken for the one that left the pid: a number may have been given away since. */
export interface Likeness {
  /** Part of its command line. */
  argument: string
  /** The folder it works in; absent: any. */
  folder?: string
}

async function looksLike(pid: number, { argument, folder }: Likeness): Promise<boolean> {
  try {
    const commandLine = (await readFile(`/proc/${pid}/cmdline`, 'utf8')).split('\0')
    if (!commandLine.some((part) => part.includes(argument))) return false
    return folder === undefined || (await readlink(`/proc/${pid}/cwd`)) === folder
  } catch {
    return false
  }
}

/** The pid in a file when that process still lives and looks right, else null. */
export async function pidInFile(path: string, likeness: Likeness): Promise<number | null> {
  const text = await readFile(path, 'utf8').catch(() => '')
  const pid = Number.parseInt(text, 10)
  if (!Number.isInteger(pid) || pid <= 1 || !isAlive(pid)) return null
  return (await looksLike(pid, likeness)) ? pid : null
}

export const writePid = (path: string, pid: number): Promise<void> => writeFile(path, `${pid}\n`)

/** Waits until a process has ended; false when it has not within the time. */
export async function waitForEnd(pid: number, milliseconds: number): Promise<boolean> {
  const until = performance.now() + milliseconds
  while (isAlive(pid)) {
    if (performance.now() > until) return false
    await pause(pollMilliseconds)
  }
  return true
}

/** Asks a process to end, and ends it when it does not. */
export async function endProcess(pid: number, patienceMilliseconds: number): Promise<void> {
  if (!isAlive(pid)) return
  process.kill(pid, 'SIGTERM')
  if (await waitForEnd(pid, patienceMilliseconds)) return
  if (isAlive(pid)) process.kill(pid, 'SIGKILL')
  await waitForEnd(pid, 5_000)
}

/** Ends what a killed start left behind; answers whether there was something. */
export async function endOrphan(pidFile: string, likeness: Likeness, patienceMilliseconds: number): Promise<boolean> {
  const pid = await pidInFile(pidFile, likeness)
  if (pid !== null) await endProcess(pid, patienceMilliseconds)
  await rm(pidFile, { force: true })
  return pid !== null
}

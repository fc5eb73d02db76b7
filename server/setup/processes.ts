/** Ending processes: asked first, ended when they do not, and waited for. */
import { rm, writeFile } from 'node:fs/promises'
import { isAlive, pidInFile } from './processLikeness.mjs'
import type { Likeness } from './processLikeness.mjs'

const pollMilliseconds = 30

const pause = (milliseconds: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, milliseconds))

export const writePid = (path: string, pid: number): Promise<void> => writeFile(path, `${pid}\n`)

/** Waits until a process has ended; false when it has not within the time. */
async function waitForEnd(pid: number, milliseconds: number): Promise<boolean> {
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

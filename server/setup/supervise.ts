/**
 * Keeps a program running: what ends unasked is started again, after a pause that grows while it keeps ending. A program
 * that ends before it has come up is not started again, for it has something to say.
 */
import { spawn } from 'node:child_process'
import type { ChildProcess } from 'node:child_process'
import { closeSync, openSync } from 'node:fs'
import { readFile, rename, rm } from 'node:fs/promises'
import { endProcess, writePid } from './processes.ts'

const firstPause = 500
const longestPause = 15_000
/** Having run this long it counts as sound, and the pause starts small again. */
const soundAfter = 60_000
const tailLines = 25

export interface Program {
  /** As the sentences call it: "the server". */
  name: string
  command: string
  args: string[]
  env: NodeJS.ProcessEnv
  folder: string
  logFile: string
  pidFile: string
  /** How long it may take to end when asked. */
  patienceMilliseconds: number
}

export interface Supervised {
  /** Resolves when the program ends for the first time, with the last lines of its log. */
  firstEnd: Promise<{ how: string; tail: string }>
  /** It has come up: from now on it is kept running. */
  keep(): void
  stop(): Promise<void>
  /** Ends it without asking. */
  kill(): void
}

async function lastLines(path: string): Promise<string> {
  const text = await readFile(path, 'utf8').catch(() => '')
  return text.trimEnd().split('\n').slice(-tailLines).join('\n')
}

/** `detached`: a Ctrl-C in the terminal reaches only us, and we end the parts in order. */
export async function supervise(program: Program, say: (sentence: string) => void): Promise<Supervised> {
  await rename(program.logFile, `${program.logFile}.1`).catch(() => undefined)
  let child: ChildProcess | null = null
  let timer: NodeJS.Timeout | undefined
  let stopping = false
  let kept = false
  let pause = firstPause
  let reportFirstEnd: (end: { how: string; tail: string }) => void = () => undefined
  const firstEnd = new Promise<{ how: string; tail: string }>((resolve) => (reportFirstEnd = resolve))

  function launch(): void {
    const log = openSync(program.logFile, 'a', 0o600)
    const startedAt = performance.now()
    const launched = spawn(program.command, program.args, {
      cwd: program.folder,
      env: program.env,
      detached: true,
      stdio: ['ignore', log, log],
    })
    closeSync(log)
    child = launched
    if (launched.pid !== undefined) void writePid(program.pidFile, launched.pid)
    let over = false
    const ended = (how: string) => {
      if (over) return
      over = true
      child = null
      void lastLines(program.logFile).then((tail) => reportFirstEnd({ how, tail }))
      if (stopping || !kept) return
      if (performance.now() - startedAt > soundAfter) pause = firstPause
      say(`${program.name} ended (${how}); it is started again in ${pause / 1000} s. Its words: ${program.logFile}`)
      timer = setTimeout(launch, pause)
      pause = Math.min(pause * 2, longestPause)
    }
    launched.once('error', (error) => ended(error.message))
    launched.once('exit', (code, signal) => ended(signal ?? `exit ${code}`))
  }

  launch()
  return {
    firstEnd,
    keep() {
      kept = true
    },
    async stop() {
      stopping = true
      clearTimeout(timer)
      if (child?.pid !== undefined) await endProcess(child.pid, program.patienceMilliseconds)
      await rm(program.pidFile, { force: true })
    },
    kill() {
      stopping = true
      clearTimeout(timer)
      child?.kill('SIGKILL')
    },
  }
}

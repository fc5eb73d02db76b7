/** The running parts of a start: each is stopped in the reverse order of its start. */
import { mkdir } from 'node:fs/promises'
import { join } from 'node:path'
import { endOrphan } from './processes.ts'
import { supervise } from './supervise.ts'
import type { Supervised } from './supervise.ts'

interface Stoppable {
  stop(): Promise<void>
  kill?(): void
}

const patienceMilliseconds = 15_000

export interface PartsOptions {
  root: string
  dataFolder: string
  say: (sentence: string) => void
}

export class RunningParts {
  private readonly running: { title: string; part: Stoppable }[] = []
  private readonly options: PartsOptions
  private ending = false

  constructor(options: PartsOptions) {
    this.options = options
  }

  /** In the order given here they are stopped last to first; what comes up while they stop is stopped too. */
  async add(title: string, part: Stoppable): Promise<void> {
    if (this.ending) await part.stop()
    else this.running.push({ title, part })
  }

  /** Runs a TypeScript program of ours and keeps it running. */
  async launch(title: string, script: string, args: string[], env: NodeJS.ProcessEnv): Promise<Supervised> {
    const { root, dataFolder, say } = this.options
    const logs = join(dataFolder, 'log')
    await mkdir(logs, { recursive: true, mode: 0o700 })
    const supervised = await supervise(
      {
        name: `The ${title}`,
        command: process.execPath,
        args: ['--import', 'tsx', script, ...args],
        env,
        folder: root,
        logFile: join(logs, `${title}.log`),
        pidFile: this.pidFile(title),
        patienceMilliseconds,
      },
      say,
    )
    await this.add(title, supervised)
    return supervised
  }

  /** Ends what a killed start left running, before the new one begins. */
  async endOrphan(title: string, script: string): Promise<void> {
    const { root, say } = this.options
    const found = await endOrphan(this.pidFile(title), { argument: script, folder: root }, patienceMilliseconds)
    if (found) say(`A ${title} that an earlier start left running was stopped.`)
  }

  async stop(): Promise<void> {
    this.ending = true
    for (const { title, part } of this.running.toReversed()) {
      const since = performance.now()
      try {
        await part.stop()
        this.options.say(`The ${title} has stopped (${((performance.now() - since) / 1000).toFixed(1)} s).`)
      } catch (error) {
        this.options.say(`The ${title} did not stop as it should: ${error instanceof Error ? error.message : error}`)
      }
    }
  }

  /** At once, without asking. */
  kill(): void {
    for (const { part } of this.running.toReversed()) part.kill?.()
  }

  private pidFile(title: string): string {
    return join(this.options.dataFolder, 'run', `${title}.pid`)
  }
}

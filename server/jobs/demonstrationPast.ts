/** Waits until the simulator has written the demonstration's past, then has it taken in, once. */
import { setTimeout as pause } from 'node:timers/promises'
import type { Parts, RunningPart } from '../config/parts.ts'
import { isTakenIn, readPast, takeInPast, takePastJob } from '../services/demonstrationPast.ts'

const askAgainMilliseconds = 1000

export interface DemonstrationPastRun extends RunningPart {
  /** Resolves when there is nothing more to take in, or after `stop`. */
  done: Promise<void>
}

/** Does nothing outside a demonstration and where no folder is named. */
export function startDemonstrationPast(parts: Parts, askAgainAfter = askAgainMilliseconds): DemonstrationPastRun {
  const { installationKind, demonstrationPastFolder: folder } = parts.environment
  const stopping = new AbortController()
  const isStopped = () => stopping.signal.aborted

  async function run(pastFolder: string): Promise<void> {
    while (!isStopped()) {
      const past = await readPast(pastFolder)
      if (past && (await isTakenIn(past))) return
      const job = past && (await takePastJob(parts, past))
      if (past && job !== null) return takeInPast(parts, past, job, isStopped)
      await pause(askAgainAfter, undefined, { signal: stopping.signal }).catch(() => undefined)
    }
  }

  const done =
    installationKind === 'demonstration' && folder !== null
      ? run(folder).catch((error: unknown) =>
          parts.logger.error({ error }, 'the past of the demonstration is not taken in'),
        )
      : Promise.resolve()
  return {
    done,
    async stop() {
      stopping.abort()
      await done
    },
  }
}

/** Waits until the simulator has written the demonstration's past, then has it taken in, once. */
import { setTimeout as pause } from 'node:timers/promises'
import type { Parts, RunningPart } from '../config/parts.ts'
import { earlierAttempts, forgetMarks, pastJobKind, readPast, releaseLeftJobs } from '../services/demonstrationPast.ts'
import type { Past } from '../services/demonstrationPast.ts'
import { addJob, failJob, takeJob } from '../services/longJobs.ts'
import { takeInPast } from './demonstrationPast/takeIn.ts'

const askAgainMilliseconds = 1000
const title = 'Taking in the demonstration’s past'

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
      if (past) {
        const job = await takePastJob(parts, past)
        return job === null ? undefined : takeInPast(parts, past, job, isStopped)
      }
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

/** The job for this past, begun or taken up again; null when it is in. */
async function takePastJob(parts: Parts, { hash }: Past): Promise<number | null> {
  const { isOver, isNewest, waiting, outdated } = await earlierAttempts(hash)
  if (isOver) return null
  await releaseLeftJobs()
  for (const id of outdated) await failJob(parts, id, 'Another past has taken the place of this one')
  if (!isNewest) await forgetMarks(parts)
  if (waiting.length === 0) await addJob(parts, { kind: pastJobKind, title, parameters: { hash } })
  return (await takeJob(parts, pastJobKind))?.id ?? null
}

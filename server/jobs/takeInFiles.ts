/** Checks and stores the files that were brought in, one after the other; what a stop cut off is begun again. */
import { z } from 'zod'
import type { Parts, RunningPart } from '../config/parts.ts'
import { failJob, takeJob } from '../services/longJobs.ts'
import { noteCalledOff, sweepUploads, uploadJobKind } from '../services/uploads.ts'
import { work } from './takeInFiles/work.ts'

/** A lease that a killed process left runs out within a minute. */
const lookAgainMs = 30_000
const parameters = z.object({ uploadId: z.number().int(), act: z.enum(['check', 'store']) })

export interface TakeInFiles extends RunningPart {
  /** Resolves when nothing is left to do. */
  wake(): Promise<void>
}

export function startTakeInFiles(parts: Parts): TakeInFiles {
  const { bus, logger } = parts
  let isStopped = false
  let running: Promise<void> | null = null
  let isAskedAgain = false

  async function drain(): Promise<void> {
    try {
      do {
        isAskedAgain = false
        for (let job = await next(); job && !isStopped; job = await next()) await work(parts, job, () => isStopped)
      } while (isAskedAgain && !isStopped)
    } catch (error) {
      if (!isStopped) logger.error({ error }, 'files wait to be taken in; it is tried again')
    }
  }

  async function next() {
    if (isStopped) return null
    const job = await takeJob(parts, uploadJobKind)
    if (!job) return null
    const asked = parameters.safeParse(job.parameters)
    if (asked.success) return { jobId: job.id, ...asked.data }
    await failJob(parts, job.id, 'The order cannot be read')
    return null
  }

  function wake(): Promise<void> {
    isAskedAgain = true
    running ??= drain().finally(() => (running = null))
    return running
  }

  const subscriptions = [
    bus.subscribe('upload.ordered', () => void wake()),
    bus.subscribe('job.progressed', ({ id, kind, status }) => {
      if (kind !== uploadJobKind || status !== 'cancelled') return
      noteCalledOff(parts, id).catch((error: unknown) => logger.warn({ error }, 'a cancelled file could not be noted'))
    }),
  ]
  const timer = setInterval(() => void wake(), lookAgainMs)
  void sweepUploads(parts)
    .catch((error: unknown) => logger.warn({ error }, 'old uploads could not be cleared away'))
    .then(wake)

  return {
    wake,
    async stop() {
      isStopped = true
      clearInterval(timer)
      for (const unsubscribe of subscriptions) unsubscribe()
      await running
    },
  }
}

/** Shows a long row of late windows as work with its share done: the demonstration's past, a day of back-fill. */
import type { Parts } from '../../config/parts.ts'
import { longestOrderlyCatchUp } from '../../services/estimates.ts'
import { addJob, finishJob, reportProgress, takeJob } from '../../services/longJobs.ts'

const kind = 'pastEstimates'
const title = 'Computing the estimates of past readings, newest first'
/** People need no more. */
const reportEveryMs = 1_000

export interface PastProgress {
  /** Is it time to count what is left? */
  isDue(): boolean
  /** Windows that are still to compute. */
  report(remaining: number): Promise<void>
}

export function createPastProgress(parts: Parts): PastProgress {
  let job: { id: number; total: number } | null = null
  let reportedAt = -Infinity

  async function begin(remaining: number): Promise<void> {
    const interrupted = await takeJob(parts, kind)
    if (!interrupted && remaining <= longestOrderlyCatchUp) return
    if (!interrupted) await addJob(parts, { kind, title, parameters: { total: remaining } })
    const taken = interrupted ?? (await takeJob(parts, kind))
    if (taken) job = { id: taken.id, total: Math.max(remaining, Number(taken.parameters.total) || 0) }
  }

  return {
    isDue: () => parts.clock.monotonic() - reportedAt >= reportEveryMs,
    async report(remaining) {
      reportedAt = parts.clock.monotonic()
      if (!job) await begin(remaining)
      if (!job) return
      const { id, total } = job
      if (remaining === 0) {
        job = null
        return finishJob(parts, id, `${total} windows computed`)
      }
      job = { id, total: Math.max(total, remaining) }
      const done = job.total - remaining
      // Cancelled by a person: the windows are computed all the same, only nothing more is shown of it.
      if (!(await reportProgress(parts, id, done / job.total, `${done} of ${job.total} windows`))) job = null
    },
  }
}

/** The demonstration's past: the folder it comes in, how far it has been taken in, and estimates that are invented and say so. */
import { LongJob } from '../models/index.ts'

export { insertInvented, rowsAtOnce } from './demonstrationPast/insertInvented.ts'
export type { VersionsThen } from './demonstrationPast/insertInvented.ts'
export { readPast, readStretches, rowsOf, seaStateBatches } from './demonstrationPast/manifest.ts'
export type { Past, Stretch } from './demonstrationPast/manifest.ts'
export { forgetMarks, markTakenIn, takenInFrom } from './demonstrationPast/marks.ts'

export const pastJobKind = 'demonstrationPast'

/** What became of earlier attempts at the past of this hash. */
export interface EarlierAttempts {
  /** It is in, or a person called it off. */
  isOver: boolean
  /** It was the last to be tried, so its marks are worth something. */
  isNewest: boolean
  /** Waiting jobs for this past, and those for another. */
  waiting: number[]
  outdated: number[]
}

export async function earlierAttempts(hash: string): Promise<EarlierAttempts> {
  const jobs = await LongJob.findAll({ where: { kind: pastJobKind }, order: [['id', 'ASC']] })
  const isOfThis = ({ parameters }: LongJob) => parameters?.hash === hash
  const isWaiting = ({ status }: LongJob) => status === 'queued' || status === 'running'
  const newest = jobs.at(-1)
  return {
    isOver: jobs.some((job) => isOfThis(job) && (job.status === 'done' || job.status === 'cancelled')),
    isNewest: newest !== undefined && isOfThis(newest),
    waiting: jobs.filter((job) => isWaiting(job) && isOfThis(job)).map(({ id }) => id),
    outdated: jobs.filter((job) => isWaiting(job) && !isOfThis(job)).map(({ id }) => id),
  }
}

/** There is one server a database: a job that runs at its start was left by an earlier one and need not wait for its lease. */
export const releaseLeftJobs = async (): Promise<void> =>
  void (await LongJob.update(
    { status: 'queued', leaseUntil: null },
    { where: { kind: pastJobKind, status: 'running' } },
  ))

/** What takes the readings in while the process runs: streams, group commits, and the work that runs beside them. */
import type { Logger } from 'pino'
import type { Clock } from '../../config/clock.ts'
import type { Bus } from '../bus.ts'
import { createCommitTimes, takeCommitId } from './commitIds.ts'
import { createGroupCommit } from './groupCommit.ts'
import type { GroupCommit } from './groupCommit.ts'
import { restoreLinks } from './restore.ts'
import { createStreams } from './streams.ts'
import type { Streams } from './streams.ts'

export interface ReadingStore extends GroupCommit {
  streams: Streams
  /** Newest commit that no computation under way can have seen in part. */
  settledCommitId(): number
}

/** A computation that takes longer than this has been ended. */
const computationEndsWithinMs = 120_000

export interface ReadingStoreOptions {
  bus: Bus
  clock: Clock
  logger: Logger
  /** How long frames wait for others to be committed with, ms. */
  betweenCommitsMs?: number | undefined
}

/** One in a process. Rebuilds what is known of the links first. */
export async function createReadingStore(options: ReadingStoreOptions): Promise<ReadingStore> {
  const { clock } = options
  await restoreLinks(clock)
  const commitTimes = createCommitTimes(await takeCommitId(), clock.monotonic())
  return {
    ...createGroupCommit({ ...options, commitTimes }),
    streams: createStreams(),
    settledCommitId: () => commitTimes.settledCommitId(clock.monotonic(), computationEndsWithinMs),
  }
}

/**
 * Numbers of commits: they only grow, through restarts too, and within a station in the order in which its readings
 * became visible. An estimate keeps the newest it saw, and can be computed again from exactly those readings.
 *
 * A thousand are reserved at a time, so that a commit needs no extra write; a restart skips what was left over.
 */
import { execute, select } from '../../models/sql.ts'
import { database } from './database.ts'

const reservedAtOnce = 1000
const counter = { job: 'commitIds', subjectKind: 'readings', subjectId: 0 }

let last = 0
let reservedUpTo = 0
let reserving: Promise<void> | null = null

export async function takeCommitId(): Promise<number> {
  while (last >= reservedUpTo) await (reserving ??= reserve().finally(() => (reserving = null)))
  last += 1
  return last
}

async function reserve(): Promise<void> {
  await execute(
    database(),
    `INSERT INTO watermarks (job, subjectKind, subjectId, epoch, updatedAt)
     VALUES (:job, :subjectKind, :subjectId, :reservedAtOnce, UTC_TIMESTAMP(3))
     ON DUPLICATE KEY UPDATE epoch = epoch + :reservedAtOnce, updatedAt = VALUES(updatedAt)`,
    { ...counter, reservedAtOnce },
  )
  const [row] = await select<{ epoch: number }>(
    database(),
    'SELECT epoch FROM watermarks WHERE job = :job AND subjectKind = :subjectKind AND subjectId = :subjectId',
    counter,
  )
  reservedUpTo = Number(row?.epoch)
  last = reservedUpTo - reservedAtOnce
}

/**
 * When commits were made, so that compaction can leave alone what a computation under way may have seen in part.
 * `settledCommitId` answers the newest commit made at least `ageMs` ago; those before the start of this process
 * (`firstCommitId` was its first) count once the process is that old itself.
 */
export interface CommitTimes {
  note(commitId: number, monotonicMs: number): void
  settledCommitId(monotonicMs: number, ageMs: number): number
}

export function createCommitTimes(firstCommitId: number, startedMonotonicMs: number): CommitTimes {
  const recent = [{ commitId: firstCommitId, at: startedMonotonicMs }]
  let settled = 0
  return {
    note(commitId, at) {
      recent.push({ commitId, at })
    },
    settledCommitId(now, ageMs) {
      for (let oldest = recent[0]; oldest && now - oldest.at >= ageMs; oldest = recent[0]) {
        settled = oldest.commitId
        recent.shift()
      }
      return settled
    },
  }
}

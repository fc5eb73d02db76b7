/** How far back the demonstration's past has been taken in, so that a stop in the middle loses nothing. */
import type { Parts } from '../../config/parts.ts'
import { execute, select } from '../../models/sql.ts'

const job = 'demonstrationPast'

export type PastKind = 'readings' | 'seaStates'

/** Everything from this time on is in; infinite for nothing yet. ms since 1970 UTC. */
export async function takenInFrom({ sequelize }: Parts, kind: PastKind, stationId: number): Promise<number> {
  const [row] = await select<{ doneUpTo: Date | null }>(
    sequelize,
    'SELECT doneUpTo FROM watermarks WHERE job = :job AND subjectKind = :kind AND subjectId = :stationId',
    { job, kind, stationId },
  )
  return row?.doneUpTo?.getTime() ?? Infinity
}

export async function markTakenIn(parts: Parts, kind: PastKind, stationId: number, from: number): Promise<void> {
  await execute(
    parts.sequelize,
    `INSERT INTO watermarks (job, subjectKind, subjectId, doneUpTo, epoch, updatedAt)
     VALUES (:job, :kind, :stationId, :from, 0, :now)
     ON DUPLICATE KEY UPDATE doneUpTo = LEAST(COALESCE(doneUpTo, :from), :from), updatedAt = :now`,
    { job, kind, stationId, from: new Date(from), now: parts.clock.now() },
  )
}

/** For another past than the one that was begun. */
export async function forgetMarks({ sequelize }: Parts): Promise<void> {
  await execute(sequelize, 'DELETE FROM watermarks WHERE job = :job', { job })
}

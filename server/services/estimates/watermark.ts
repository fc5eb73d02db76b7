/**
 * How far the windows of a station have been dealt with, and by which start of the job. A job that was overtaken by a
 * newer one finds another epoch in its row and writes nothing.
 */
import type { Transaction } from 'sequelize'
import type { Parts } from '../../config/parts.ts'
import { execute, select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'

/** A station's row, held by one start of the job. */
export interface Mark {
  stationId: number
  epoch: number
  /** End of the newest window dealt with, ms since 1970 UTC; null for a station that never had readings. */
  doneUpTo: number | null
}

/** Another start of the job has taken the station over. */
export class Superseded extends Error {
  constructor(stationId: number) {
    super(`another start of the program computes the estimates of station ${stationId}`)
  }
}

const keyOf = (stationId: number) => ({ job: 'computeEstimates', subjectKind: 'station', subjectId: stationId })
const ofKey = 'job = :job AND subjectKind = :subjectKind AND subjectId = :subjectId'

interface MarkRow {
  epoch: number
  doneUpTo: Date | null
}

async function lockRow(parts: Parts, stationId: number, transaction: Transaction): Promise<MarkRow> {
  const sql = `SELECT epoch, doneUpTo FROM watermarks WHERE ${ofKey} FOR UPDATE`
  const [row] = await select<MarkRow>(parts.sequelize, sql, keyOf(stationId), transaction)
  if (!row) throw new Error(`station ${stationId} has no watermark`)
  return row
}

/** Takes a station over: whoever had it before can write no more. */
export function takeOver(parts: Parts, stationId: number): Promise<Mark> {
  return inTransaction(parts.sequelize, async (transaction) => {
    await execute(
      parts.sequelize,
      `INSERT INTO watermarks (job, subjectKind, subjectId, doneUpTo, epoch, updatedAt)
       VALUES (:job, :subjectKind, :subjectId, NULL, 1, :now)
       ON DUPLICATE KEY UPDATE epoch = epoch + 1, updatedAt = :now`,
      { ...keyOf(stationId), now: parts.clock.now() },
      transaction,
    )
    const { epoch, doneUpTo } = await lockRow(parts, stationId, transaction)
    return { stationId, epoch: Number(epoch), doneUpTo: doneUpTo?.getTime() ?? null }
  })
}

/** Locks the row until the end of the transaction; throws `Superseded` when it is no longer ours. */
export async function holdMark(parts: Parts, mark: Mark, transaction: Transaction): Promise<void> {
  const { epoch } = await lockRow(parts, mark.stationId, transaction)
  if (Number(epoch) !== mark.epoch) throw new Superseded(mark.stationId)
}

/** Only forwards. The row must be held. */
export async function moveMark(parts: Parts, mark: Mark, doneUpTo: number, transaction: Transaction): Promise<void> {
  await execute(
    parts.sequelize,
    `UPDATE watermarks SET doneUpTo = GREATEST(COALESCE(doneUpTo, :doneUpTo), :doneUpTo), updatedAt = :now
     WHERE ${ofKey}`,
    { ...keyOf(mark.stationId), doneUpTo: new Date(doneUpTo), now: parts.clock.now() },
    transaction,
  )
}

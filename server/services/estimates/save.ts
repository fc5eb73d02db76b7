/** Writes what became of a window: estimate, detail, watermark and late note change in one transaction or not at all. */
import type { Transaction } from 'sequelize'
import type { Parts } from '../../config/parts.ts'
import { Estimate, EstimateDetail } from '../../models/index.ts'
import { execute, select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'
import { estimateRow } from './row.ts'
import type { EstimateFigures, EstimateMaking } from './row.ts'
import { holdMark, moveMark } from './watermark.ts'
import type { Mark } from './watermark.ts'

export interface WindowOutcome {
  mark: Mark
  windowStartsAt: number
  windowEndsAt: number
  /** The window was next in order, and the watermark moves to its end. */
  isNext: boolean
  /** Newest commit of readings that was seen; null when there were none. */
  inputCommitId: number | null
}

export interface ComputedEstimate {
  figures: EstimateFigures
  making: EstimateMaking
  /** Deflated JSON of the whole result; null when nothing could be computed. */
  detail: Uint8Array | null
}

/** Answers the revision. News goes out when it is durable. `alongside`: what is written with it, or not at all. */
export async function saveEstimate(
  parts: Parts,
  outcome: WindowOutcome,
  computed: ComputedEstimate,
  alongside?: (transaction: Transaction) => Promise<void>,
): Promise<number> {
  const { stationId } = outcome.mark
  const { windowEndsAt } = outcome
  const revision = await inTransaction(parts.sequelize, async (transaction) => {
    await settle(parts, outcome, transaction)
    const [last] = await select<{ revision: number | null }>(
      parts.sequelize,
      `SELECT MAX(revision) AS revision FROM estimates
       WHERE stationId = :stationId AND windowEndsAt = :windowEndsAt AND runId = 0`,
      { stationId, windowEndsAt: new Date(windowEndsAt) },
      transaction,
    )
    const row = { ...estimateRow(computed.figures, computed.making), revision: Number(last?.revision ?? 0) + 1 }
    await Estimate.create(row, { transaction })
    if (computed.detail) {
      const { runId, revision: number } = row
      const detail = { stationId, windowEndsAt: row.windowEndsAt, runId, revision: number }
      await EstimateDetail.create({ ...detail, payload: Buffer.from(computed.detail) }, { transaction })
    }
    await alongside?.(transaction)
    return row.revision
  })
  parts.bus.publish('estimate.saved', { stationId, windowEndsAt, revision })
  return revision
}

/** A window without a sample, or one whose estimate already saw everything: no row, and it is dealt with. */
export async function passOver(parts: Parts, outcome: WindowOutcome): Promise<void> {
  await inTransaction(parts.sequelize, (transaction) => settle(parts, outcome, transaction))
}

/**
 * The watermark moves on and the late note goes, unless readings were committed since they were read: then the note
 * stays, or is made. The note is deleted first, which waits for a commit under way that renews it, and only then is
 * it asked what has been committed.
 */
async function settle(parts: Parts, outcome: WindowOutcome, transaction: Transaction): Promise<void> {
  const { mark, windowEndsAt, windowStartsAt, inputCommitId } = outcome
  await holdMark(parts, mark, transaction)
  const window = { stationId: mark.stationId, windowEndsAt: new Date(windowEndsAt) }
  await execute(
    parts.sequelize,
    'DELETE FROM dirtyWindows WHERE stationId = :stationId AND windowEndsAt = :windowEndsAt',
    window,
    transaction,
  )
  const newest = await newestCommit(parts, mark.stationId, windowStartsAt, windowEndsAt, transaction)
  if (newest !== null && newest > (inputCommitId ?? 0)) {
    await execute(
      parts.sequelize,
      `INSERT IGNORE INTO dirtyWindows (stationId, windowEndsAt, cause, notedAt)
       VALUES (:stationId, :windowEndsAt, 'late', :now)`,
      { ...window, now: parts.clock.now() },
      transaction,
    )
  }
  if (outcome.isNext) await moveMark(parts, mark, windowEndsAt, transaction)
}

/** A frame spans at most a minute. */
const longestFrameMs = 60_000

async function newestCommit(
  { sequelize }: Parts,
  stationId: number,
  from: number,
  to: number,
  transaction: Transaction,
): Promise<number | null> {
  const [row] = await select<{ newest: number | null }>(
    sequelize,
    `SELECT MAX(newest) AS newest FROM (
       SELECT MAX(lastCommitId) AS newest FROM readingBlocks
       WHERE stationId = :stationId AND startsAt >= :from AND startsAt < :to
       UNION ALL
       SELECT MAX(commitId) FROM frames
       WHERE stationId = :stationId AND startsAt > :frameFrom AND startsAt < :to) AS commits`,
    { stationId, from: new Date(from), to: new Date(to), frameFrom: new Date(from - longestFrameMs) },
    transaction,
  )
  return row?.newest == null ? null : Number(row.newest)
}

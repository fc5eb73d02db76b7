/** Packed minutes in their table. */
import type { Transaction } from 'sequelize'
import { execute, select } from '../../models/sql.ts'
import { database } from './database.ts'
import type { PackedReadings } from './payload.ts'
import type { ReadingSource } from './window.ts'

export interface Block extends PackedReadings {
  stationId: number
  /** Start of the minute, ms since 1970 UTC. */
  startsAt: number
  part: number
  deploymentId: number
  firstCommitId: number
  lastCommitId: number
  source: ReadingSource
  importId: number | null
  sampleRate: number
  sampleCount: number
  missingCount: number
  clockOffset: number | null
}

/** Rows in one statement: far below the largest packet, for a payload travels as twice its size. */
const rowsAtOnce = 200

export async function insertBlocks(blocks: readonly Block[], transaction: Transaction): Promise<void> {
  for (let n = 0; n < blocks.length; n += rowsAtOnce) {
    const rows = blocks
      .slice(n, n + rowsAtOnce)
      .map((block) => [
        block.stationId,
        new Date(block.startsAt),
        block.part,
        block.deploymentId,
        block.firstCommitId,
        block.lastCommitId,
        block.source,
        block.importId,
        block.sampleRate,
        block.sampleCount,
        block.missingCount,
        block.clockOffset,
        block.digest,
        block.payload,
      ])
    await execute(
      database(),
      `INSERT INTO readingBlocks (stationId, startsAt, part, deploymentId, firstCommitId, lastCommitId, source, importId,
         sampleRate, sampleCount, missingCount, clockOffset, digest, payload) VALUES :rows`,
      { rows },
      transaction,
    )
  }
}

/** The highest part of each minute that has one, by the start of the minute. */
export async function newestParts(
  stationId: number,
  from: number,
  to: number,
  transaction: Transaction,
): Promise<Map<number, number>> {
  const rows = await select<{ startsAt: Date; part: number }>(
    database(),
    `SELECT startsAt, MAX(part) AS part FROM readingBlocks
     WHERE stationId = :stationId AND startsAt >= :from AND startsAt < :to GROUP BY startsAt`,
    { stationId, from: new Date(from), to: new Date(to) },
    transaction,
  )
  return new Map(rows.map(({ startsAt, part }) => [startsAt.getTime(), part]))
}

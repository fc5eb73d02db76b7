/**
 * Months of the partitioned tables: split off ahead of time, and dropped whole when their retention has passed.
 * Dropping a month takes no longer than a moment, whatever it holds.
 */
import { DateTime } from 'luxon'
import { execute, select } from '../../models/sql.ts'
import { database } from './database.ts'

/** Months kept, the current one not counted; null keeps all. */
export type Retention = Record<PartitionedTable, number | null>
export type PartitionedTable = 'readingBlocks' | 'stationHealthHours' | 'estimates' | 'estimateDetails' | 'outlooks'

const monthsAhead = 2
/** At the first run months are split off this far back, so that they can be dropped one by one. */
const monthsBack = 13

export interface PartitionChange {
  table: PartitionedTable
  added: string[]
  dropped: string[]
}

export async function keepPartitions(now: Date, retention: Retention): Promise<PartitionChange[]> {
  const changes: PartitionChange[] = []
  for (const [table, months] of Object.entries(retention) as [PartitionedTable, number | null][]) {
    const added = await addMonths(table, now)
    const dropped = months === null ? [] : await dropMonths(table, now, months)
    if (added.length + dropped.length > 0) changes.push({ table, added, dropped })
  }
  return changes
}

const monthOf = (now: Date): DateTime => DateTime.fromJSDate(now, { zone: 'utc' }).startOf('month')
const nameOf = (month: DateTime): string => `p${month.toFormat('yyyyLL')}`

async function namesOf(table: PartitionedTable): Promise<string[]> {
  const rows = await select<{ name: string }>(
    database(),
    `SELECT PARTITION_NAME AS name FROM information_schema.PARTITIONS
     WHERE TABLE_SCHEMA = DATABASE() AND TABLE_NAME = :table AND PARTITION_NAME <> 'future'
     ORDER BY PARTITION_ORDINAL_POSITION`,
    { table },
  )
  return rows.map(({ name }) => name)
}

async function addMonths(table: PartitionedTable, now: Date): Promise<string[]> {
  const newest = (await namesOf(table)).at(-1)
  const first = newest
    ? DateTime.fromFormat(newest.slice(1), 'yyyyLL', { zone: 'utc' }).plus({ months: 1 })
    : monthOf(now).minus({ months: monthsBack })
  const last = monthOf(now).plus({ months: monthsAhead })
  const months: DateTime[] = []
  for (let month = first; month <= last; month = month.plus({ months: 1 })) months.push(month)
  if (months.length === 0) return []
  const definitions = months.map(
    (month) => `PARTITION ${nameOf(month)} VALUES LESS THAN ('${month.plus({ months: 1 }).toFormat('yyyy-LL-dd')}')`,
  )
  await execute(
    database(),
    `ALTER TABLE ${table} REORGANIZE PARTITION future INTO
     (${definitions.join(', ')}, PARTITION future VALUES LESS THAN (MAXVALUE))`,
  )
  return months.map(nameOf)
}

async function dropMonths(table: PartitionedTable, now: Date, months: number): Promise<string[]> {
  const oldestKept = nameOf(monthOf(now).minus({ months }))
  const outdated = (await namesOf(table)).filter((name) => name < oldestKept)
  if (outdated.length > 0) await execute(database(), `ALTER TABLE ${table} DROP PARTITION ${outdated.join(', ')}`)
  return outdated
}

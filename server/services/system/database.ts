/** How large the database is, by table and day by day. */
import type { SystemView } from '../../../shared/schemas/system.ts'
import type { Parts } from '../../config/parts.ts'
import { DatabaseSize } from '../../models/index.ts'
import { select } from '../../models/sql.ts'

const largestTables = 12
const days = 60

interface TableRow {
  name: string
  bytes: number
  rowCount: number
}

const tablesOf = ({ sequelize }: Pick<Parts, 'sequelize'>): Promise<TableRow[]> =>
  select<TableRow>(
    sequelize,
    `SELECT TABLE_NAME AS name, CAST(COALESCE(DATA_LENGTH + INDEX_LENGTH, 0) AS UNSIGNED) AS bytes,
            CAST(COALESCE(TABLE_ROWS, 0) AS UNSIGNED) AS rowCount
     FROM information_schema.TABLES WHERE TABLE_SCHEMA = DATABASE() ORDER BY bytes DESC`,
  )

const sumOf = (tables: TableRow[]): number => tables.reduce((sum, { bytes }) => sum + Number(bytes), 0)

export async function databaseSchema(parts: Pick<Parts, 'sequelize' | 'clock'>): Promise<SystemView['database']> {
  const [tables, [server], sizes] = await Promise.all([
    tablesOf(parts),
    select<{ version: string }>(parts.sequelize, 'SELECT VERSION() AS version'),
    DatabaseSize.findAll({ order: [['day', 'DESC']], limit: days }),
  ])
  return {
    version: server?.version ?? 'unknown',
    bytes: sumOf(tables),
    tables: tables
      .slice(0, largestTables)
      .map(({ name, bytes, rowCount }) => ({ name, bytes: Number(bytes), rows: Number(rowCount) })),
    sizes: sizes.map(({ day, bytes }) => ({ day, bytes })).reverse(),
  }
}

/** One row a day, the newest of the day. */
export async function noteDatabaseSize(parts: Pick<Parts, 'sequelize' | 'clock'>): Promise<void> {
  const bytes = sumOf(await tablesOf(parts))
  await DatabaseSize.upsert({ day: parts.clock.now().toISOString().slice(0, 10), bytes })
}

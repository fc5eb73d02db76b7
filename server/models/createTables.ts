/** How migrations make tables: every statement may be run again, for a stop in the middle leaves the first ones done. */
import type { Sequelize } from 'sequelize'
import { execute } from './sql.ts'

export type TableText = [name: string, columns: string, partition?: string]

const engine = 'ENGINE=InnoDB DEFAULT CHARSET=utf8mb4 COLLATE=utf8mb4_unicode_ci'

/** By month of a time column: the job that keeps partitions splits months off `future` ahead of time. */
export const byMonthOf = (column: string): string =>
  ` PARTITION BY RANGE COLUMNS(\`${column}\`) (PARTITION future VALUES LESS THAN (MAXVALUE))`

export async function createTables(sequelize: Sequelize, tables: TableText[]): Promise<void> {
  for (const [name, columns, partition = ''] of tables) {
    await execute(sequelize, `CREATE TABLE IF NOT EXISTS \`${name}\` (${columns}) ${engine}${partition}`)
  }
}

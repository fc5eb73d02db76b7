import type { Sequelize } from 'sequelize'
import { execute } from '../models/sql.ts'

/** When an offset was confirmed: an estimate from before is computed again without it. */
export async function up(sequelize: Sequelize): Promise<void> {
  await execute(
    sequelize,
    `ALTER TABLE clockOffsets ADD COLUMN IF NOT EXISTS recordedAt DATETIME(3) NOT NULL DEFAULT CURRENT_TIMESTAMP(3)`,
  )
}

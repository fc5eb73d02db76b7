import type { Sequelize } from 'sequelize'
import { execute } from '../models/sql.ts'

/** For whom somebody was told, where they are the deputy of others who are away. */
export async function up(sequelize: Sequelize): Promise<void> {
  await execute(sequelize, 'ALTER TABLE `deliveries` ADD COLUMN IF NOT EXISTS `standsInFor` VARCHAR(300) NULL')
}

import type { Sequelize } from 'sequelize'
import { execute } from '../models/sql.ts'

/** What a bulletin's e-mail shows, frozen with the e-mail: a bulletin cancelled before it went out must not change it. */
export async function up(sequelize: Sequelize): Promise<void> {
  await execute(sequelize, 'ALTER TABLE `messages` ADD COLUMN IF NOT EXISTS `bulletin` JSON NULL AFTER `content`')
}

import type { Sequelize } from 'sequelize'
import { createTables } from '../models/createTables.ts'

/** Backups and tried restores with their outcome, and the database's size day by day. */
export const up = (sequelize: Sequelize): Promise<void> =>
  createTables(sequelize, [
    [
      'backupRuns',
      `\`id\` INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
       \`kind\` ENUM('backup', 'restoreTest') NOT NULL,
       \`startedAt\` DATETIME(3) NOT NULL,
       \`finishedAt\` DATETIME(3) NOT NULL,
       \`isGood\` BOOLEAN NOT NULL,
       \`fileName\` VARCHAR(120) NULL,
       \`bytes\` BIGINT UNSIGNED NULL,
       \`rows\` BIGINT UNSIGNED NULL,
       \`says\` VARCHAR(1000) NULL,
       KEY backupRunsByKind (\`kind\`, \`finishedAt\`)`,
    ],
    ['databaseSizes', '`day` DATE NOT NULL PRIMARY KEY, `bytes` BIGINT UNSIGNED NOT NULL'],
  ])

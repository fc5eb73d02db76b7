import type { Sequelize } from 'sequelize'
import { createTables } from '../models/createTables.ts'

/** Configurations' files that were put in force, with what stood before, so that each can be taken back. */
export const up = (sequelize: Sequelize): Promise<void> =>
  createTables(sequelize, [
    [
      'configurationRuns',
      `\`id\` INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
       \`at\` DATETIME(3) NOT NULL,
       \`personId\` INT UNSIGNED NULL,
       \`reason\` VARCHAR(500) NOT NULL,
       \`changes\` JSON NOT NULL,
       \`before\` JSON NOT NULL,
       \`rolledBackAt\` DATETIME(3) NULL,
       FOREIGN KEY (\`personId\`) REFERENCES \`people\` (\`id\`)`,
    ],
  ])

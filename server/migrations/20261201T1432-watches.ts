import type { Sequelize } from 'sequelize'
import { createTables } from '../models/createTables.ts'
import type { TableText } from '../models/createTables.ts'
import { execute } from '../models/sql.ts'

/** Who was on watch, what was handed over, and files that belong to lines of the log. */
const tables: TableText[] = [
  [
    'watches',
    `\`id\` INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
     \`personId\` INT UNSIGNED NOT NULL,
     \`name\` VARCHAR(20) NOT NULL,
     \`startedAt\` DATETIME(3) NOT NULL,
     \`endedAt\` DATETIME(3) NULL,
     \`notes\` JSON NOT NULL,
     \`expected\` VARCHAR(2000) NOT NULL,
     \`openKey\` TINYINT GENERATED ALWAYS AS (IF(\`endedAt\` IS NULL, 1, NULL)) STORED UNIQUE,
     KEY watchesByTime (\`startedAt\`),
     FOREIGN KEY (\`personId\`) REFERENCES \`people\` (\`id\`)`,
  ],
  [
    'handOvers',
    `\`id\` INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
     \`fromWatchId\` INT UNSIGNED NOT NULL,
     \`toWatchId\` INT UNSIGNED NOT NULL,
     \`sheet\` JSON NOT NULL,
     \`signedFromAt\` DATETIME(3) NULL,
     \`signedToAt\` DATETIME(3) NOT NULL,
     \`reason\` VARCHAR(500) NULL,
     KEY handOversOwed (\`signedFromAt\`),
     FOREIGN KEY (\`fromWatchId\`) REFERENCES \`watches\` (\`id\`),
     FOREIGN KEY (\`toWatchId\`) REFERENCES \`watches\` (\`id\`)`,
  ],
  [
    'attachments',
    `\`id\` INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
     \`entryId\` BIGINT UNSIGNED NOT NULL,
     \`name\` VARCHAR(200) NOT NULL,
     \`mediaType\` VARCHAR(60) NOT NULL,
     \`bytes\` INT UNSIGNED NOT NULL,
     \`sha256\` CHAR(64) NOT NULL,
     \`path\` VARCHAR(255) NOT NULL,
     \`createdAt\` DATETIME(3) NOT NULL,
     KEY attachmentsOfEntry (\`entryId\`),
     FOREIGN KEY (\`entryId\`) REFERENCES \`logEntries\` (\`id\`)`,
  ],
]

export async function up(sequelize: Sequelize): Promise<void> {
  await createTables(sequelize, tables)
  await execute(sequelize, 'ALTER TABLE `logEntries` ADD KEY IF NOT EXISTS logCorrections (`correctsId`)')
}

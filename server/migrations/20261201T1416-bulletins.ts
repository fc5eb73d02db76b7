import type { Sequelize } from 'sequelize'
import { createTables } from '../models/createTables.ts'
import type { TableText } from '../models/createTables.ts'

/** Bulletins: drafts that are edited, and issues whose content is frozen. */
const tables: TableText[] = [
  [
    'bulletins',
    `\`id\` INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
     \`chainId\` INT UNSIGNED NULL,
     \`status\` ENUM('draft', 'issued', 'replaced', 'cancelled') NOT NULL,
     \`number\` VARCHAR(20) NULL UNIQUE,
     \`draft\` JSON NOT NULL,
     \`content\` JSON NULL,
     \`figures\` JSON NOT NULL,
     \`frozenAt\` DATETIME(3) NULL,
     \`replacesId\` INT UNSIGNED NULL,
     \`authorId\` INT UNSIGNED NOT NULL,
     \`consentById\` INT UNSIGNED NULL,
     \`aloneReason\` VARCHAR(500) NULL,
     \`people\` INT UNSIGNED NULL,
     \`issuedAt\` DATETIME(3) NULL,
     \`validUntil\` DATETIME(3) NULL,
     \`nextIssueAt\` DATETIME(3) NULL,
     \`remindedAt\` DATETIME(3) NULL,
     \`cancelledAt\` DATETIME(3) NULL,
     \`cancelReason\` VARCHAR(500) NULL,
     \`cancelledById\` INT UNSIGNED NULL,
     \`version\` INT UNSIGNED NOT NULL DEFAULT 1,
     \`createdAt\` DATETIME(3) NOT NULL,
     \`updatedAt\` DATETIME(3) NOT NULL,
     KEY bulletinsByStatus (\`status\`, \`validUntil\`),
     KEY bulletinsDue (\`status\`, \`nextIssueAt\`),
     FOREIGN KEY (\`replacesId\`) REFERENCES \`bulletins\` (\`id\`),
     FOREIGN KEY (\`authorId\`) REFERENCES \`people\` (\`id\`),
     FOREIGN KEY (\`consentById\`) REFERENCES \`people\` (\`id\`),
     FOREIGN KEY (\`cancelledById\`) REFERENCES \`people\` (\`id\`)`,
  ],
]

export const up = (sequelize: Sequelize): Promise<void> => createTables(sequelize, tables)

import type { Sequelize } from 'sequelize'
import { createTables } from '../models/createTables.ts'
import { execute } from '../models/sql.ts'

/** Second factors with their recovery codes, and on which device a session is. */
const statements = [
  `ALTER TABLE \`people\`
     ADD COLUMN IF NOT EXISTS \`totpSince\` DATETIME(3) NULL,
     ADD COLUMN IF NOT EXISTS \`totpLastStep\` BIGINT UNSIGNED NULL`,
  `ALTER TABLE \`people\` MODIFY COLUMN \`totpSecret\` VARCHAR(160) NULL`,
  `ALTER TABLE \`sessions\` ADD COLUMN IF NOT EXISTS \`device\` VARCHAR(60) NULL`,
]

export async function up(sequelize: Sequelize): Promise<void> {
  for (const statement of statements) await execute(sequelize, statement)
  await createTables(sequelize, [
    [
      'recoveryCodes',
      `\`id\` INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
       \`personId\` INT UNSIGNED NOT NULL,
       \`codeHash\` BINARY(32) NOT NULL,
       \`createdAt\` DATETIME(3) NOT NULL,
       \`usedAt\` DATETIME(3) NULL,
       UNIQUE KEY recoveryCode (\`personId\`, \`codeHash\`),
       FOREIGN KEY (\`personId\`) REFERENCES \`people\` (\`id\`)`,
    ],
  ])
}

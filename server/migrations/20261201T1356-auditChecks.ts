import type { Sequelize } from 'sequelize'
import { createTables } from '../models/createTables.ts'
import { execute } from '../models/sql.ts'

/** When the audit's chain was last walked, and what was found; and how it is filtered by time and person. */
export async function up(sequelize: Sequelize): Promise<void> {
  await createTables(sequelize, [
    [
      'auditChecks',
      `\`id\` INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
       \`at\` DATETIME(3) NOT NULL,
       \`personId\` INT UNSIGNED NULL,
       \`isWhole\` BOOLEAN NOT NULL,
       \`result\` JSON NOT NULL,
       KEY auditChecksByTime (\`at\`),
       FOREIGN KEY (\`personId\`) REFERENCES \`people\` (\`id\`)`,
    ],
  ])
  await execute(
    sequelize,
    `ALTER TABLE \`audits\`
       ADD KEY IF NOT EXISTS auditsByTime (\`at\`),
       ADD KEY IF NOT EXISTS auditsByAction (\`action\`, \`id\`)`,
  )
}

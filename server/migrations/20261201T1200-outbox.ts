import type { Sequelize } from 'sequelize'
import { execute } from '../models/sql.ts'

/** What the outbox remembers of each e-mail, so that a stop at any moment loses none and repeats none without need. */
const statements = [
  `ALTER TABLE \`messages\`
     ADD COLUMN IF NOT EXISTS \`queuedAt\` DATETIME(3) NULL,
     ADD KEY IF NOT EXISTS messagesToQueue (\`queuedAt\`, \`id\`)`,
  `ALTER TABLE \`deliveries\`
     ADD COLUMN IF NOT EXISTS \`rootMessageId\` BIGINT UNSIGNED NULL,
     ADD COLUMN IF NOT EXISTS \`handedOverAt\` DATETIME(3) NULL,
     ADD COLUMN IF NOT EXISTS \`unknownCount\` INT UNSIGNED NOT NULL DEFAULT 0,
     ADD KEY IF NOT EXISTS deliveriesOfPerson (\`personId\`, \`createdAt\`),
     ADD KEY IF NOT EXISTS deliveriesOfRoot (\`rootMessageId\`)`,
]

export async function up(sequelize: Sequelize): Promise<void> {
  for (const statement of statements) await execute(sequelize, statement)
}

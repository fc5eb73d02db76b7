import type { Sequelize } from 'sequelize'
import { createTables } from '../models/createTables.ts'
import type { TableText } from '../models/createTables.ts'
import { execute } from '../models/sql.ts'

/** What setting a station up adds to its tables. Every statement may be run again. */
const additions = [
  `ALTER TABLE stations
     ADD COLUMN IF NOT EXISTS datumSurveyedOn DATE NULL AFTER datumOffset,
     ADD COLUMN IF NOT EXISTS notes TEXT NOT NULL DEFAULT '' AFTER areaPolygon,
     ADD UNIQUE KEY IF NOT EXISTS stationShortName (shortName),
     ADD UNIQUE KEY IF NOT EXISTS stationName (name)`,
  'ALTER TABLE stationSettings ADD COLUMN IF NOT EXISTS sampleRate DOUBLE NULL AFTER validFrom',
  `UPDATE stationSettings v JOIN stations s ON s.id = v.stationId SET v.sampleRate = s.sampleRate
     WHERE v.sampleRate IS NULL`,
  `ALTER TABLE deployments
     ADD COLUMN IF NOT EXISTS surveyedOn DATE NULL,
     ADD COLUMN IF NOT EXISTS notes TEXT NOT NULL DEFAULT '',
     ADD COLUMN IF NOT EXISTS resolved JSON NULL`,
  'ALTER TABLE deploymentSensors ADD COLUMN IF NOT EXISTS surveyed JSON NULL',
  `ALTER TABLE auxiliaryReadings
     ADD COLUMN IF NOT EXISTS source ENUM('push', 'entered', 'file') NOT NULL DEFAULT 'entered'`,
]

const tables: TableText[] = [
  [
    'deploymentDrafts',
    `\`id\` INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
     \`stationId\` INT UNSIGNED NOT NULL,
     \`basedOnId\` INT UNSIGNED NULL,
     \`correctsId\` INT UNSIGNED NULL,
     \`content\` JSON NOT NULL,
     \`version\` INT UNSIGNED NOT NULL DEFAULT 1,
     \`authorId\` INT UNSIGNED NULL,
     \`deploymentId\` INT UNSIGNED NULL,
     \`createdAt\` DATETIME(3) NOT NULL,
     \`updatedAt\` DATETIME(3) NOT NULL,
     \`retiredAt\` DATETIME(3) NULL,
     \`openFor\` INT UNSIGNED GENERATED ALWAYS AS (IF(\`retiredAt\` IS NULL, IFNULL(\`correctsId\`, 0), NULL)) STORED,
     UNIQUE KEY draftOpen (\`stationId\`, \`openFor\`),
     FOREIGN KEY (\`stationId\`) REFERENCES \`stations\` (\`id\`),
     FOREIGN KEY (\`basedOnId\`) REFERENCES \`deployments\` (\`id\`),
     FOREIGN KEY (\`deploymentId\`) REFERENCES \`deployments\` (\`id\`),
     FOREIGN KEY (\`authorId\`) REFERENCES \`people\` (\`id\`)`,
  ],
  [
    'uploads',
    `\`id\` INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
     \`stationId\` INT UNSIGNED NOT NULL,
     \`kind\` ENUM('readings', 'auxiliary') NOT NULL,
     \`fileName\` VARCHAR(255) NOT NULL,
     \`storedAs\` VARCHAR(64) NOT NULL,
     \`bytes\` BIGINT UNSIGNED NOT NULL,
     \`fileHash\` BINARY(32) NOT NULL,
     \`state\` ENUM('received', 'checking', 'checked', 'storing', 'stored', 'failed', 'cancelled') NOT NULL,
     \`layout\` JSON NULL,
     \`report\` JSON NULL,
     \`jobId\` INT UNSIGNED NULL,
     \`importId\` INT UNSIGNED NULL,
     \`personId\` INT UNSIGNED NULL,
     \`createdAt\` DATETIME(3) NOT NULL,
     \`updatedAt\` DATETIME(3) NOT NULL,
     \`retiredAt\` DATETIME(3) NULL,
     KEY uploadsOfStation (\`stationId\`, \`retiredAt\`),
     FOREIGN KEY (\`stationId\`) REFERENCES \`stations\` (\`id\`),
     FOREIGN KEY (\`personId\`) REFERENCES \`people\` (\`id\`)`,
  ],
]

export async function up(sequelize: Sequelize): Promise<void> {
  for (const addition of additions) await execute(sequelize, addition)
  await createTables(sequelize, tables)
}

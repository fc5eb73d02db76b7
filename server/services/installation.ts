/** What this database is for. Set once, at the first start; afterwards a start of the other kind is refused. */
import type { Sequelize } from 'sequelize'
import { Op } from 'sequelize'
import type { InstallationView } from '../../shared/schemas/session.ts'
import type { Parts } from '../config/parts.ts'
import { Installation, Person, SettingVersion } from '../models/index.ts'
import { select } from '../models/sql.ts'

/** A start that must not go on; the message is one clear sentence for the person at the terminal. */
export class StartRefused extends Error {
  constructor(message: string) {
    super(message)
    this.name = 'StartRefused'
  }
}

export const schemaVersion = 1

/** Before the schema is touched: a database that holds something else is left alone. */
export async function refuseForeignTables(sequelize: Sequelize): Promise<void> {
  const rows = await select<{ name: string }>(
    sequelize,
    'SELECT TABLE_NAME AS name FROM information_schema.TABLES WHERE TABLE_SCHEMA = DATABASE()',
  )
  const names = rows.map((row) => row.name)
  if (names.length > 0 && !names.includes('migrations')) {
    throw new StartRefused(
      `The database named in DATABASE_URL already holds other tables (${names.slice(0, 3).join(', ')}): give Offing an empty one.`,
    )
  }
}

/** Sets the kind at the first start and refuses a database of the other kind. */
export async function claimInstallation({ environment, clock }: Pick<Parts, 'environment' | 'clock'>): Promise<void> {
  const kind = environment.installationKind
  const [row] = await Installation.findOrCreate({
    where: { id: 1 },
    defaults: { id: 1, kind, schemaVersion, createdAt: clock.now() },
  })
  if (row.kind === kind) return
  throw new StartRefused(
    kind === 'real'
      ? 'This database holds a demonstration: real use needs an empty database of its own (DATABASE_URL).'
      : 'This database is in real use: the demonstration needs an empty database of its own (DATABASE_URL).',
  )
}

export const hasAdministrator = async (): Promise<boolean> =>
  (await Person.count({ where: { role: 'admin', disabledAt: null, passwordHash: { [Op.not]: null } } })) > 0

/** What anybody may know before signing in. */
export async function presentInstallation({ clock, environment }: Parts): Promise<InstallationView> {
  const port = await SettingVersion.findOne({
    where: { groupName: 'port', validFrom: { [Op.lte]: clock.now() } },
    order: [
      ['validFrom', 'DESC'],
      ['id', 'DESC'],
    ],
  })
  const { portName, timeZone } = port?.content ?? {}
  return {
    kind: environment.installationKind,
    portName: typeof portName === 'string' ? portName : 'Harbour',
    timeZone: typeof timeZone === 'string' ? timeZone : 'Etc/UTC',
    serverTime: clock.now().toISOString(),
    needsSetUp: !(await hasAdministrator()),
  }
}

/** Backups and tried restores, each recorded with its outcome: a failure stands there too. */
import { basename } from 'node:path'
import type { Parts } from '../config/parts.ts'
import { BackupRun } from '../models/index.ts'
import { recordAudit } from './audit.ts'
import { BackupFault } from './backups/client.ts'
import { makeBackup } from './backups/make.ts'
import type { Manifest } from './backups/manifest.ts'
import { testRestore } from './backups/restore.ts'
import type { Restored } from './backups/restore.ts'
import { inTransaction } from './transaction.ts'
import { writeSystemLine } from './watchLog.ts'

export { BackupFault } from './backups/client.ts'
export { backupFolder } from './backups/make.ts'
export { newestManifest } from './backups/manifest.ts'
export { restoreInto } from './backups/restore.ts'

export const rowsIn = ({ tables }: Manifest): number => Object.values(tables).reduce((sum, { rows }) => sum + rows, 0)

export async function backUp(parts: Parts, folder: string): Promise<{ path: string; manifest: Manifest }> {
  const startedAt = parts.clock.now()
  try {
    const made = await makeBackup(parts, folder)
    const { bytes } = made.manifest
    const outcome = { isGood: true, fileName: basename(made.path), bytes, rows: rowsIn(made.manifest), says: null }
    await record(parts, 'backup', startedAt, outcome)
    return made
  } catch (error) {
    await recordFailure(parts, 'backup', startedAt, error)
    throw error
  }
}

export async function tryRestore(parts: Parts, manifestPath: string): Promise<Restored> {
  const startedAt = parts.clock.now()
  try {
    const restored = await testRestore(manifestPath, parts.environment.databaseUrl)
    const { manifest, differences } = restored
    const says = differences.length > 0 ? differences.join('; ').slice(0, 1000) : null
    const outcome = { isGood: says === null, fileName: basename(manifestPath), bytes: manifest.bytes, says }
    await record(parts, 'restoreTest', startedAt, { ...outcome, rows: rowsIn(manifest) })
    return restored
  } catch (error) {
    await recordFailure(parts, 'restoreTest', startedAt, error)
    throw error
  }
}

type Outcome = Pick<BackupRun, 'isGood' | 'fileName' | 'bytes' | 'rows' | 'says'>

async function record(parts: Parts, kind: BackupRun['kind'], startedAt: Date, outcome: Outcome): Promise<void> {
  await inTransaction(parts.sequelize, async (transaction) => {
    const run = await BackupRun.create({ kind, startedAt, finishedAt: parts.clock.now(), ...outcome }, { transaction })
    const change = { action: `${kind}.${outcome.isGood ? 'succeed' : 'fail'}`, entity: 'backupRun', entityId: run.id }
    await recordAudit(parts, { ...change, personId: null, after: outcome }, transaction)
    if (outcome.isGood) return
    const what = kind === 'backup' ? 'No backup was made' : 'A restore was tried and failed'
    await writeSystemLine(parts, { kind: 'system', text: `${what}: ${outcome.says ?? 'no reason known'}` }, transaction)
  })
}

/** Where the database itself is gone nothing can be recorded: the command says it all the same. */
async function recordFailure(parts: Parts, kind: BackupRun['kind'], startedAt: Date, error: unknown): Promise<void> {
  const says = (error instanceof BackupFault ? error.message : String(error)).slice(0, 1000)
  const outcome = { isGood: false, fileName: null, bytes: null, rows: null, says }
  await record(parts, kind, startedAt, outcome).catch(() => undefined)
}

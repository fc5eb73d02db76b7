/**
 * `npm run backup [-- FOLDER]`: one consistent snapshot of the database, compressed, with a manifest of rows and checksums
 * by table, into FOLDER or the data folder's `backups`. The server goes on meanwhile. Secrets (the file of JWT_SECRET_FILE,
 * passwords of the mail server) are not in it: keep them elsewhere. Exit codes: 0 made; 2 not, and why.
 */
import { resolve } from 'node:path'
import { BackupFault, backupFolder, backUp, rowsIn } from '../services/backups.ts'
import { CommandFault, commandParts, runCommand, say } from './surroundings.ts'

await runCommand(async () => {
  const [folder, ...more] = process.argv.slice(2)
  if (more.length > 0 || folder?.startsWith('-')) throw new CommandFault('npm run backup [-- FOLDER]')
  const parts = commandParts()
  try {
    const { path, manifest } = await backUp(parts, folder ? resolve(folder) : backupFolder(parts))
    const tables = Object.keys(manifest.tables).length
    say(`${path}`)
    say(`${tables} tables, ${rowsIn(manifest)} rows, ${(manifest.bytes / 1e6).toFixed(1)} MB compressed.`)
    say('Try it: npm run restore -- --test')
    return 0
  } catch (error) {
    if (error instanceof BackupFault) throw new CommandFault(error.message)
    throw error
  } finally {
    await parts.close()
  }
})

/** A backup put into an empty place, and what stands there held against the manifest, table by table. */
import { createReadStream } from 'node:fs'
import { Writable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { createGunzip } from 'node:zlib'
import { connectDatabase } from '../../config/database.ts'
import { execute, select } from '../../models/sql.ts'
import { BackupFault, databaseIn, dumpArguments, runClient } from './client.ts'
import { createDumpTally, differencesOf } from './dumpTally.ts'
import type { Tally } from './dumpTally.ts'
import { checkedDump, readManifest } from './manifest.ts'
import type { Manifest } from './manifest.ts'

export interface Restored {
  manifest: Manifest
  /** Where what was restored differs from the backup, in words; empty: it is the same. */
  differences: string[]
}

/** `url` names a database that exists and holds nothing. */
export async function restoreInto(manifestPath: string, url: string): Promise<Restored> {
  const manifest = await readManifest(manifestPath)
  const dump = await checkedDump(manifestPath, manifest)
  await refuseTables(url)
  const { child, ended } = await runClient('mariadb', url, ['--batch', databaseIn(url)])
  if (!child.stdin) throw new Error('mariadb has no input')
  child.stdout?.resume()
  // Where the client ends early its own words say why, not the broken pipe.
  await pipeline(createReadStream(dump), createGunzip(), child.stdin).catch(() => undefined)
  await ended
  return { manifest, differences: differencesOf(manifest.tables, await tallyOf(url)) }
}

async function tallyOf(url: string): Promise<Tally> {
  const { child, ended } = await runClient('mariadb-dump', url, dumpArguments(url))
  if (!child.stdout) throw new Error('mariadb-dump has no output')
  child.stdin?.end()
  const { through, tally } = createDumpTally()
  const nowhere = new Writable({ write: (_chunk, _encoding, done) => done() })
  await pipeline(child.stdout, through, nowhere)
  await ended
  return tally()
}

async function refuseTables(url: string): Promise<void> {
  const outside = connectDatabase({ url, poolSize: 1 })
  try {
    const rows = await select<{ name: string }>(
      outside,
      'SELECT TABLE_NAME AS name FROM information_schema.TABLES WHERE TABLE_SCHEMA = DATABASE() LIMIT 3',
    )
    if (rows.length === 0) return
    const names = rows.map(({ name }) => name).join(', ')
    throw new BackupFault(
      `${databaseIn(url)} already holds tables (${names} …): a backup is restored into an empty database only.`,
    )
  } catch (error) {
    throw databaseWords(error, url) ?? error
  } finally {
    await outside.close()
  }
}

function databaseWords(error: unknown, url: string): BackupFault | null {
  if (error instanceof BackupFault) return error
  const words = error instanceof Error ? error.message : ''
  if (/Unknown database/i.test(words))
    return new BackupFault(`There is no database ${databaseIn(url)}: make an empty one first.`)
  return /denied/i.test(words) ? new BackupFault(`The database refuses: ${words}`) : null
}

/** Into a scratch database on the same server, which goes afterwards. */
export async function testRestore(manifestPath: string, serverUrl: string): Promise<Restored> {
  const scratch = `${databaseIn(serverUrl)}_restore_test`
  const url = new URL(serverUrl)
  url.pathname = `/${encodeURIComponent(scratch)}`
  const outside = connectDatabase({ url: serverUrl, poolSize: 1 })
  try {
    await execute(outside, `DROP DATABASE IF EXISTS \`${scratch}\``)
    await execute(outside, `CREATE DATABASE \`${scratch}\` CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci`)
    return await restoreInto(manifestPath, url.href)
  } catch (error) {
    if (!(error instanceof BackupFault) && error instanceof Error && /denied/i.test(error.message)) {
      const user = decodeURIComponent(new URL(serverUrl).username)
      throw new BackupFault(
        `The user ${user} may not make the scratch database. As root of MariaDB: GRANT ALL ON \`${scratch.replaceAll('_', '\\_')}\`.* TO ${user}; or name an empty database: npm run restore -- MANIFEST --into URL.`,
      )
    }
    throw error
  } finally {
    await execute(outside, `DROP DATABASE IF EXISTS \`${scratch}\``).catch(() => undefined)
    await outside.close()
  }
}

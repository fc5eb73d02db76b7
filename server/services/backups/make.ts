/** A backup: one consistent snapshot of the database, compressed, with a manifest, while the server goes on. */
import { createHash } from 'node:crypto'
import { createWriteStream } from 'node:fs'
import { copyFile, mkdir, readdir, rename, rm, stat, statfs, writeFile } from 'node:fs/promises'
import { dirname, join, relative } from 'node:path'
import { Transform } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { createGzip } from 'node:zlib'
import type { Parts } from '../../config/parts.ts'
import { softwareVersion } from '../../config/softwareVersion.ts'
import { select } from '../../models/sql.ts'
import { BackupFault, databaseIn, dumpArguments, runClient } from './client.ts'
import { createDumpTally } from './dumpTally.ts'
import { digestOfFile, ending } from './manifest.ts'
import type { Manifest } from './manifest.ts'

/** Of the data folder: what is not in the database and cannot be made again. */
const keptOfDataFolder = ['audit-anchors', 'attachments']
/** Left free besides the backup itself. */
const spareBytes = 64 * 1024 * 1024
const mebibyte = 1024 * 1024

export const backupFolder = ({ environment }: Pick<Parts, 'environment'>): string =>
  join(environment.dataFolder, 'backups')

/** Nothing half done stays: the manifest is written last, and what failed is removed. */
export async function makeBackup(parts: Parts, folder: string): Promise<{ path: string; manifest: Manifest }> {
  await mkdir(folder, { recursive: true, mode: 0o700 }).catch(() => {
    throw new BackupFault(`The folder ${folder} cannot be made or written.`)
  })
  await checkRoom(parts, folder)
  const madeAt = parts.clock.now()
  const name = `offing-${madeAt.toISOString().replace(/[:.]/g, '').replace('Z', '')}Z`
  const dump = join(folder, `${name}.sql.gz`)
  try {
    const { tally, sha256 } = await writeDump(parts.environment.databaseUrl, `${dump}.part`)
    await rename(`${dump}.part`, dump)
    const manifest: Manifest = {
      format: 'offing.backup.1',
      madeAt: madeAt.toISOString(),
      software: softwareVersion,
      kind: parts.environment.installationKind,
      database: databaseIn(parts.environment.databaseUrl),
      file: `${name}.sql.gz`,
      bytes: (await stat(dump)).size,
      sha256,
      migrations: await migrationsOf(parts),
      tables: tally,
      files: await copyFiles(parts, join(folder, `${name}.files`)),
    }
    const path = join(folder, `${name}${ending}`)
    await writeFile(`${path}.part`, `${JSON.stringify(manifest, null, 2)}\n`, { mode: 0o600 })
    await rename(`${path}.part`, path)
    return { path, manifest }
  } catch (error) {
    await Promise.all(
      [`${dump}.part`, dump, join(folder, `${name}.files`)].map((path) => rm(path, { recursive: true, force: true })),
    )
    throw fullDisk(error) ? new BackupFault(`The disk of ${folder} is full: no backup was made.`) : error
  }
}

const fullDisk = (error: unknown): boolean => error instanceof Error && 'code' in error && error.code === 'ENOSPC'

/** Compressed it is smaller, but how much nobody knows before. */
async function checkRoom({ sequelize, environment }: Parts, folder: string): Promise<void> {
  const [size] = await select<{ bytes: number }>(
    sequelize,
    'SELECT CAST(COALESCE(SUM(DATA_LENGTH), 0) AS UNSIGNED) AS bytes FROM information_schema.TABLES WHERE TABLE_SCHEMA = :schema',
    { schema: databaseIn(environment.databaseUrl) },
  )
  const { bavail, bsize } = await statfs(folder)
  const [free, needed] = [bavail * bsize, Number(size?.bytes ?? 0) + spareBytes]
  if (free >= needed) return
  const words = (bytes: number): string => `${Math.ceil(bytes / mebibyte)} MiB`
  throw new BackupFault(
    `No room for a backup in ${folder}: ${words(free)} are free, up to ${words(needed)} are needed. Make room, or name another folder: npm run backup -- FOLDER.`,
  )
}

async function writeDump(url: string, path: string) {
  const { child, ended } = await runClient('mariadb-dump', url, dumpArguments(url))
  if (!child.stdout) throw new Error('mariadb-dump has no output')
  child.stdin?.end()
  const { through, tally } = createDumpTally()
  const hash = createHash('sha256')
  const digest = new Transform({
    transform(chunk: Buffer, _encoding, done) {
      hash.update(chunk)
      done(null, chunk)
    },
  })
  await pipeline(child.stdout, through, createGzip({ level: 3 }), digest, createWriteStream(path, { mode: 0o600 }))
  await ended
  return { tally: tally(), sha256: hash.digest('hex') }
}

const migrationsOf = async ({ sequelize }: Parts): Promise<string[]> =>
  (await select<{ name: string }>(sequelize, 'SELECT name FROM migrations ORDER BY name')).map(({ name }) => name)

async function copyFiles({ environment }: Parts, target: string): Promise<Manifest['files']> {
  const found: Manifest['files'] = []
  for (const name of keptOfDataFolder) {
    for (const path of await filesIn(join(environment.dataFolder, name))) {
      const inside = relative(environment.dataFolder, path)
      const copy = join(target, inside)
      await mkdir(dirname(copy), { recursive: true, mode: 0o700 })
      await copyFile(path, copy)
      found.push({ path: inside, bytes: (await stat(copy)).size, sha256: await digestOfFile(copy) })
    }
  }
  return found
}

/** The file itself, or all in a folder; none where there is nothing. */
async function filesIn(path: string): Promise<string[]> {
  const found = await stat(path).catch(() => null)
  if (!found) return []
  if (found.isFile()) return [path]
  const entries = await readdir(path, { withFileTypes: true, recursive: true })
  return entries.filter((entry) => entry.isFile()).map((entry) => join(entry.parentPath, entry.name))
}

/** The file beside each backup: what is in it, so that a restore can be held against it. */
import { createReadStream } from 'node:fs'
import { createHash } from 'node:crypto'
import { readdir, readFile } from 'node:fs/promises'
import { basename, dirname, join } from 'node:path'
import { pipeline } from 'node:stream/promises'
import { z } from 'zod'
import { BackupFault } from './client.ts'

export const manifest = z.object({
  format: z.literal('offing.backup.1'),
  madeAt: z.iso.datetime(),
  software: z.string(),
  kind: z.enum(['demonstration', 'real']),
  database: z.string(),
  /** Beside the manifest. */
  file: z.string(),
  bytes: z.number().int(),
  sha256: z.string(),
  /** Names of the schema's migrations, oldest first. */
  migrations: z.array(z.string()),
  tables: z.record(z.string(), z.object({ rows: z.number().int(), sha256: z.string() })),
  /** Files of the data folder, kept beside the dump; secrets and caught e-mails are not among them. */
  files: z.array(z.object({ path: z.string(), bytes: z.number().int(), sha256: z.string() })),
})
export type Manifest = z.infer<typeof manifest>

export const ending = '.manifest.json'

export async function readManifest(path: string): Promise<Manifest> {
  const text = await readFile(path, 'utf8').catch(() => {
    throw new BackupFault(`${path}: cannot be read.`)
  })
  try {
    return manifest.parse(JSON.parse(text))
  } catch {
    throw new BackupFault(`${path}: is no manifest of a backup.`)
  }
}

/** The newest in a folder, by name; null: there is none. */
export async function newestManifest(folder: string): Promise<string | null> {
  const names = await readdir(folder).catch(() => [])
  const newest = names
    .filter((name) => name.endsWith(ending))
    .sort()
    .at(-1)
  return newest ? join(folder, newest) : null
}

export async function digestOfFile(path: string): Promise<string> {
  const hash = createHash('sha256')
  await pipeline(createReadStream(path), hash)
  return hash.digest('hex')
}

/** Throws where the dump beside a manifest is not the one it speaks of. */
export async function checkedDump(path: string, { file, sha256 }: Manifest): Promise<string> {
  const dump = join(dirname(path), basename(file))
  const found = await digestOfFile(dump).catch(() => {
    throw new BackupFault(`${dump}: cannot be read, though the manifest names it.`)
  })
  if (found !== sha256) throw new BackupFault(`${dump}: is not what was backed up: its checksum differs.`)
  return dump
}

/** A file of secrets that only the server's user can read; written whole or not at all. */
import { randomBytes } from 'node:crypto'
import { mkdir, readFile, rename, writeFile } from 'node:fs/promises'
import { dirname } from 'node:path'
import type { z } from 'zod'

/** Null: there is none, or none that can be read. */
export async function readSecrets<S extends z.ZodType>(file: string, shape: S): Promise<z.output<S> | null> {
  try {
    const parsed = shape.safeParse(JSON.parse(await readFile(file, 'utf8')))
    return parsed.success ? parsed.data : null
  } catch {
    return null
  }
}

export async function writeSecrets(file: string, secrets: unknown): Promise<void> {
  const beside = `${file}.${randomBytes(4).toString('hex')}`
  await mkdir(dirname(file), { recursive: true })
  await writeFile(beside, `${JSON.stringify(secrets, null, 2)}\n`, { mode: 0o600, flag: 'wx' })
  await rename(beside, file)
}

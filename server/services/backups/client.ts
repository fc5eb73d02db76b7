/** MariaDB's own client programs, with the password in a file that nobody else reads and that goes afterwards. */
import { spawn } from 'node:child_process'
import type { ChildProcess } from 'node:child_process'
import { mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

/** What a person can mend, in plain words. */
export class BackupFault extends Error {}

export interface Running {
  child: ChildProcess
  /** Resolves when it ended well, else throws with its last words. */
  ended: Promise<void>
}

const quoted = (text: string): string => `"${text.replaceAll('\\', '\\\\').replaceAll('"', '\\"')}"`

export const databaseIn = (url: string): string => decodeURIComponent(new URL(url).pathname.slice(1))

export async function runClient(program: 'mariadb-dump' | 'mariadb', url: string, args: string[]): Promise<Running> {
  const { hostname, port, username, password } = new URL(url)
  const folder = await mkdtemp(join(tmpdir(), 'offing-client-'))
  const file = join(folder, 'options.cnf')
  const options = [
    '[client]',
    `host=${quoted(hostname.replace(/^\[|\]$/g, ''))}`,
    `port=${port || 3306}`,
    'protocol=tcp',
    `user=${quoted(decodeURIComponent(username))}`,
    `password=${quoted(decodeURIComponent(password))}`,
    'default-character-set=utf8mb4',
    '',
  ]
  await writeFile(file, options.join('\n'), { mode: 0o600 })
  const child = spawn(program, [`--defaults-file=${file}`, ...args], { stdio: ['pipe', 'pipe', 'pipe'] })
  let words = ''
  child.stderr.on('data', (chunk: Buffer) => (words = (words + chunk.toString()).slice(-2_000)))
  const ended = new Promise<void>((resolve, reject) => {
    child.once('error', (error: NodeJS.ErrnoException) =>
      reject(
        error.code === 'ENOENT'
          ? new BackupFault(`${program} is missing on this machine: install Debian's package mariadb-client.`)
          : error,
      ),
    )
    child.once('close', (code) =>
      code === 0 ? resolve() : reject(new BackupFault(`${program} ended with ${code}: ${words.trim() || 'no words'}`)),
    )
  }).finally(() => rm(folder, { recursive: true, force: true }))
  // Whoever does not wait for the end yet must not bring the process down.
  ended.catch(() => undefined)
  return { child, ended }
}

/** One snapshot of all tables, rows in the order of their keys, without anything that changes from run to run. */
export const dumpArguments = (url: string): string[] => [
  '--single-transaction',
  '--quick',
  '--skip-lock-tables',
  '--order-by-primary',
  '--hex-blob',
  '--no-tablespaces',
  '--skip-dump-date',
  '--skip-comments',
  '--skip-add-locks',
  '--skip-tz-utc',
  '--routines',
  '--triggers',
  databaseIn(url),
]

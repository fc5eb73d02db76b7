/** The version that every estimate names: of the package, and of the very sources where they are known. */
import { execFileSync } from 'node:child_process'
import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { z } from 'zod'

const folder = fileURLToPath(new URL('../..', import.meta.url))
const manifest: unknown = JSON.parse(readFileSync(`${folder}/package.json`, 'utf8'))
const { version } = z.object({ version: z.string() }).parse(manifest)

/** Name of the commit, with a mark where sources were changed since; `dev` outside a clone. */
function sources(): string {
  try {
    return execFileSync('git', ['describe', '--always', '--dirty', '--abbrev=9', '--exclude=*'], {
      cwd: folder,
      encoding: 'utf8',
      stdio: ['ignore', 'pipe', 'ignore'],
      timeout: 2_000,
    }).trim()
  } catch {
    return 'dev'
  }
}

/** Such as `0.1.0+1a2b3c4d5-dirty`, at most 40 characters. */
export const softwareVersion = `${version}+${sources()}`.slice(0, 40)

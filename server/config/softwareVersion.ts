/** The version that every estimate names. */
import { readFileSync } from 'node:fs'
import { z } from 'zod'

const manifest: unknown = JSON.parse(readFileSync(new URL('../../package.json', import.meta.url), 'utf8'))

export const softwareVersion = z.object({ version: z.string() }).parse(manifest).version

/**
 * Anchors: numbers and hashes of seals kept outside the database, in a file that grows, so that rows cut off the chain's
 * end are found and a chain made anew does not fit. Each line is signed with the installation's secret and with the line
 * before it. Whoever can change the database, this file and the secret together leaves only what the daily e-mail named.
 */
import { createHmac, timingSafeEqual } from 'node:crypto'
import { appendFile, readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { z } from 'zod'
import type { Parts } from '../../config/parts.ts'

const line = z.object({ at: z.iso.datetime(), seal: z.number().int().positive(), hash: z.string(), mac: z.string() })

export interface Anchor {
  at: string
  sealNumber: number
  /** Hexadecimal. */
  hash: string
  /** False: not written by this installation, or a line before it is gone. */
  isOurs: boolean
}

type Surroundings = Pick<Parts, 'environment'>

export const anchorFile = ({ environment }: Surroundings): string => join(environment.dataFolder, 'audit-anchors')

const macOf = (secret: string, before: string, content: string): string =>
  createHmac('sha256', secret).update(`offing.anchor.1\n${before}\n${content}`).digest('hex')

const contentOf = ({ at, seal, hash }: Pick<z.infer<typeof line>, 'at' | 'seal' | 'hash'>): string =>
  JSON.stringify([at, seal, hash])

const same = (one: string, other: string): boolean =>
  one.length === other.length && timingSafeEqual(Buffer.from(one), Buffer.from(other))

const lines = async (parts: Surroundings): Promise<string[]> =>
  (await readFile(anchorFile(parts), 'utf8').catch(() => '')).split('\n').filter((text) => text !== '')

function parsed(text: string): z.infer<typeof line> | null {
  try {
    return line.safeParse(JSON.parse(text)).data ?? null
  } catch {
    return null
  }
}

/** Oldest first; a missing file is no anchors. */
export async function readAnchors(parts: Surroundings): Promise<Anchor[]> {
  let before = ''
  return (await lines(parts)).map((text) => {
    const one = parsed(text)
    if (!one) return { at: '', sealNumber: 0, hash: '', isOurs: false }
    const isOurs = same(one.mac, macOf(parts.environment.jwtSecret, before, contentOf(one)))
    before = one.mac
    return { at: one.at, sealNumber: one.seal, hash: one.hash, isOurs }
  })
}

const hour = 3_600_000

/** One an hour at most, and whenever the chain has grown by a hundred. */
export async function dropAnchor(
  parts: Surroundings & Pick<Parts, 'clock'>,
  seal: number,
  hash: Buffer,
): Promise<void> {
  const last = parsed((await lines(parts)).at(-1) ?? '')
  const now = parts.clock.now()
  if (last && seal <= last.seal) return
  if (last && now.getTime() - Date.parse(last.at) < hour && seal - last.seal < 100) return
  const content = { at: now.toISOString(), seal, hash: hash.toString('hex') }
  const mac = macOf(parts.environment.jwtSecret, last?.mac ?? '', contentOf(content))
  await appendFile(anchorFile(parts), `${JSON.stringify({ ...content, mac })}\n`, { mode: 0o600 })
}

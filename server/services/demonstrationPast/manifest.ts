/** The folder that the simulator wrote: its manifest, readings a stretch at a time, and sea states file by file. */
import { createHash } from 'node:crypto'
import { createReadStream } from 'node:fs'
import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { createInterface } from 'node:readline'
import { z } from 'zod'
import { pastManifest, pastSeaState } from '../../../shared/demonstration/past.ts'
import type { PastManifest, PastSeaState } from '../../../shared/demonstration/past.ts'

export interface Past {
  folder: string
  manifest: PastManifest
  /** SHA-256 of the manifest, hexadecimal: what was taken in already is known by it. */
  hash: string
}

/** Null while the simulator has not finished: it writes the manifest last. Errors: what it holds is no manifest. */
export async function readPast(folder: string): Promise<Past | null> {
  let text: string
  try {
    text = await readFile(join(folder, 'manifest.json'), 'utf8')
  } catch {
    return null
  }
  const hash = createHash('sha256').update(text).digest('hex')
  return { folder, manifest: pastManifest.parse(JSON.parse(text)), hash }
}

/** The sea states of a file, so many at once, rising in time: checked when their turn comes, so that nothing waits long. */
export async function* seaStateBatches({ folder }: Past, file: string, atOnce: number): AsyncGenerator<PastSeaState[]> {
  const states = z.array(z.unknown()).parse(JSON.parse(await readFile(join(folder, file), 'utf8')))
  for (let n = 0; n < states.length; n += atOnce) {
    yield states.slice(n, n + atOnce).map((state) => pastSeaState.parse(state))
  }
}

export interface Stretch {
  /** ms since 1970 UTC. */
  from: number
  lines: string[]
}

export interface RecordedReadings {
  letters: string[]
  /** Newest first; each begins at a multiple of its length. */
  stretches: Stretch[]
}

/** The readings file of a station, cut into stretches of so many milliseconds. Lines stay text until they are needed. */
export async function readStretches({ folder }: Past, file: string, length: number): Promise<RecordedReadings> {
  const lines = createInterface({ input: createReadStream(join(folder, file)), crlfDelay: Infinity })
  const stretches: Stretch[] = []
  let letters: string[] | null = null
  /** Rows of one minute begin alike, so their time is read once. */
  let minute = ''
  for await (const line of lines) {
    if (letters === null) letters = line.split(',').slice(1)
    else if (line !== '') {
      const beginning = line.slice(0, 16)
      if (beginning !== minute) {
        minute = beginning
        const from = Math.floor(Date.parse(`${beginning}Z`) / length) * length
        if (stretches[0]?.from !== from) stretches.unshift({ from, lines: [] })
      }
      stretches[0]?.lines.push(line)
    }
  }
  return { letters: letters ?? [], stretches }
}

/** As an import takes them: ms since 1970 UTC, and a value a sensor. */
export function* rowsOf({ lines }: Stretch): Generator<{ timeMs: number; values: (number | null)[] }> {
  for (const line of lines) {
    const [time, ...cells] = line.split(',')
    yield { timeMs: Date.parse(time ?? ''), values: cells.map((cell) => (cell === '' ? null : Number(cell))) }
  }
}

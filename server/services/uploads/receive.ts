/** A file comes in as a stream and is written beside the database, never through memory as a whole. */
import { createHash, randomUUID } from 'node:crypto'
import { createWriteStream } from 'node:fs'
import { mkdir, rm } from 'node:fs/promises'
import { join } from 'node:path'
import type { Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import type { Parts } from '../../config/parts.ts'
import { Refused } from '../problems.ts'

export const largestFile = 2 * 1024 ** 3

export const uploadsFolder = ({ environment }: Pick<Parts, 'environment'>): string =>
  join(environment.dataFolder, 'uploads')

export interface ReceivedFile {
  storedAs: string
  bytes: number
  fileHash: Buffer
}

/** Throws 413 and 415, 422 for an empty file; whatever is thrown, nothing of the file is left. */
export async function receiveFile(parts: Pick<Parts, 'environment'>, source: Readable): Promise<ReceivedFile> {
  const folder = uploadsFolder(parts)
  await mkdir(folder, { recursive: true, mode: 0o700 })
  const storedAs = `${randomUUID()}.csv`
  const path = join(folder, storedAs)
  const hash = createHash('sha256')
  let bytes = 0
  try {
    await pipeline(
      source,
      async function* measured(chunks: AsyncIterable<Buffer>) {
        for await (const chunk of chunks) {
          if (bytes === 0) refuseForeign(chunk)
          bytes += chunk.length
          if (bytes > largestFile) throw tooLarge()
          hash.update(chunk)
          yield chunk
        }
      },
      createWriteStream(path, { mode: 0o600 }),
    )
    if (bytes === 0) throw foreign('The file is empty.', 422)
    return { storedAs, bytes, fileHash: hash.digest() }
  } catch (error) {
    await rm(path, { force: true })
    throw isDiskFull(error) ? diskFull() : error
  }
}

const foreign = (detail: string, status = 415): Refused =>
  new Refused({ status, code: 'upload.notText', title: 'The file cannot be read', detail })

/** By its first bytes: what is no plain text is told before it is written. */
function refuseForeign(chunk: Buffer): void {
  const [first, second] = chunk
  if ((first === 0xff && second === 0xfe) || (first === 0xfe && second === 0xff)) {
    throw foreign('The file is in UTF-16; save it as CSV in UTF-8.')
  }
  if (first === 0x50 && second === 0x4b) throw foreign('The file is a zip or a workbook; unpack it or save it as CSV.')
  if (first === 0x1f && second === 0x8b) throw foreign('The file is compressed; unpack it first.')
  if (chunk.subarray(0, 4096).includes(0)) throw foreign('The file is no text; save it as CSV in UTF-8.')
}

const isDiskFull = (error: unknown): boolean =>
  error instanceof Error && 'code' in error && (error.code === 'ENOSPC' || error.code === 'EDQUOT')

const diskFull = (): Refused =>
  new Refused({
    status: 507,
    code: 'upload.diskFull',
    title: 'The disk is full',
    detail: 'Nothing of the file was kept. Make room on the server, then bring it in again.',
  })

const tooLarge = (): Refused =>
  new Refused({
    status: 413,
    code: 'upload.tooLarge',
    title: 'The file is too large',
    detail: 'A file may hold 2 GiB; cut it into parts.',
  })

/** Lines of a file one block after the other, so that a file of any size passes through little memory. */
import { createReadStream } from 'node:fs'
import { open } from 'node:fs/promises'
import { withoutByteOrderMark } from '../../../shared/delimitedText.ts'

const longestLine = 64 * 1024
const blockBytes = 256 * 1024

export interface LineBlock {
  lines: string[]
  /** Read of the file with this block. */
  bytes: number
}

/** A line that is longer than any row can be; the file is something else. */
export class LineTooLong extends Error {}

export async function* fileLines(path: string): AsyncGenerator<LineBlock> {
  let rest = ''
  let bytes = 0
  let isFirst = true
  const stream = createReadStream(path, { encoding: 'utf8', highWaterMark: blockBytes })
  for await (const chunk of stream as AsyncIterable<string>) {
    const text = isFirst ? withoutByteOrderMark(chunk) : rest + chunk
    isFirst = false
    bytes = stream.bytesRead
    const lines = text.split('\n')
    rest = lines.pop() ?? ''
    if (rest.length > longestLine) throw new LineTooLong()
    yield { lines: lines.map(withoutReturn), bytes }
  }
  if (rest !== '') yield { lines: [withoutReturn(rest)], bytes }
}

const withoutReturn = (line: string): string => (line.endsWith('\r') ? line.slice(0, -1) : line)

/** The first lines, whole ones only unless the file ends there. */
export async function firstLines(path: string, count: number): Promise<string[]> {
  const file = await open(path)
  try {
    const { buffer, bytesRead } = await file.read({ buffer: Buffer.alloc(longestLine) })
    const lines = withoutByteOrderMark(buffer.subarray(0, bytesRead).toString('utf8')).split('\n').map(withoutReturn)
    if (bytesRead === longestLine) lines.pop()
    return lines.slice(0, count)
  } finally {
    await file.close()
  }
}

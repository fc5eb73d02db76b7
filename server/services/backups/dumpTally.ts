/**
 * Counts and digests what a dump says of each table while it streams by: rows, and a SHA-256 over their lines. MariaDB's
 * dump writes each row on a line of its own that begins with a bracket, so both are of the very snapshot that was dumped.
 */
import { createHash } from 'node:crypto'
import type { Hash } from 'node:crypto'
import { Transform } from 'node:stream'

export type Tally = Record<string, { rows: number; sha256: string }>

const newline = 0x0a
const bracket = 0x28
const insert = /^INSERT INTO `([^`]+)` (?:\(.*\) )?VALUES/
const create = /^CREATE TABLE `([^`]+)`/

export function createDumpTally(): { through: Transform; tally(): Tally } {
  const hashes = new Map<string, { rows: number; hash: Hash }>()
  let table = ''
  let kept: Buffer[] = []

  const known = (name: string) => {
    const one = hashes.get(name) ?? { rows: 0, hash: createHash('sha256') }
    hashes.set(name, one)
    return one
  }
  function takeRow(row: Buffer, of: string): void {
    const one = known(of)
    one.rows += 1
    // The last row of a statement ends with a semicolon, and where that falls means nothing.
    one.hash.update(row.subarray(0, row.length - 1))
  }
  function take(line: Buffer): void {
    if (line[0] === bracket && table !== '') return takeRow(line, table)
    const text = line.subarray(0, 400).toString('latin1')
    const created = create.exec(text)?.[1]
    if (created !== undefined) known(created)
    const name = insert.exec(text)?.[1]
    table = name ?? (line[0] === bracket ? table : '')
    const at = name === undefined ? -1 : line.indexOf('VALUES') + 'VALUES'.length
    // A row on the same line as its statement.
    if (name !== undefined && line.length > at + 1) takeRow(line.subarray(line.indexOf(bracket, at)), name)
  }

  const through = new Transform({
    transform(chunk: Buffer, _encoding, done) {
      let from = 0
      for (let end = chunk.indexOf(newline); end >= 0; end = chunk.indexOf(newline, from)) {
        const piece = chunk.subarray(from, end)
        take(kept.length > 0 ? Buffer.concat([...kept, piece]) : piece)
        kept = []
        from = end + 1
      }
      if (from < chunk.length) kept.push(Buffer.from(chunk.subarray(from)))
      done(null, chunk)
    },
    flush(done) {
      if (kept.length > 0) take(Buffer.concat(kept))
      done()
    },
  })
  const tally = (): Tally =>
    Object.fromEntries(
      [...hashes]
        .sort(([a], [b]) => (a < b ? -1 : 1))
        .map(([name, { rows, hash }]) => [name, { rows, sha256: hash.digest('hex') }]),
    )
  return { through, tally }
}

/** In words, where two tallies differ; empty: they are the same. */
export function differencesOf(wanted: Tally, found: Tally): string[] {
  const names = [...new Set([...Object.keys(wanted), ...Object.keys(found)])].sort()
  return names.flatMap((name) => {
    const [one, other] = [wanted[name], found[name]]
    if (!one) return [`${name}: is not in the backup`]
    if (!other) return [`${name}: is missing, ${one.rows} rows wanted`]
    if (one.rows !== other.rows) return [`${name}: ${other.rows} rows, ${one.rows} wanted`]
    return one.sha256 === other.sha256 ? [] : [`${name}: ${one.rows} rows, but with another content`]
  })
}

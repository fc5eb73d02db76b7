/** Lines of text with cells between commas, semicolons or tabs, as instruments and spreadsheets of any country write them. */

export type Delimiter = ',' | ';' | '\t'
export type DecimalMark = '.' | ','

const byteOrderMark = '\uFEFF'

/** Without the mark that some programs write before the first letter. */
export const withoutByteOrderMark = (text: string): string => (text.startsWith(byteOrderMark) ? text.slice(1) : text)

/** The delimiter that cuts the heading into most cells; a semicolon or tab goes before a comma, which may be decimal. */
export function guessDelimiter(heading: string): Delimiter {
  const count = (mark: Delimiter): number => splitCells(heading, mark).length
  if (count('\t') > 1 && count('\t') >= count(';')) return '\t'
  return count(';') > 1 ? ';' : ','
}

/** Does any of the cells hold a number with a decimal comma? Never where the comma is the delimiter. */
export const guessDecimalMark = (cells: readonly string[], delimiter: Delimiter): DecimalMark =>
  delimiter !== ',' && cells.some((cell) => /^\s*[+-]?\d+,\d+\s*$/.test(cell)) ? ',' : '.'

/** The cells of one line, after RFC 4180: quotes round a cell, doubled inside it. A quote that is never closed takes the rest. */
export function splitCells(line: string, delimiter: Delimiter): string[] {
  if (!line.includes('"')) return line.split(delimiter)
  const cells: string[] = []
  let cell = ''
  let isQuoted = false
  for (let n = 0; n < line.length; n++) {
    const letter = line[n]
    if (isQuoted) {
      if (letter !== '"') cell += letter
      else if (line[n + 1] === '"') {
        cell += '"'
        n += 1
      } else isQuoted = false
    } else if (letter === '"' && cell.trim() === '') {
      cell = ''
      isQuoted = true
    } else if (letter === delimiter) {
      cells.push(cell)
      cell = ''
    } else cell += letter
  }
  return [...cells, cell]
}

const numberWithPoint = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d{1,3})?$/

/** A number as it is written with this decimal mark; null for an empty cell, NaN for what is no number. */
export function readNumber(cell: string, decimal: DecimalMark): number | null {
  const text = cell.trim().replace('\u2212', '-')
  if (text === '') return null
  if (decimal === ',' && text.includes('.')) return NaN
  const pointed = decimal === ',' ? text.replace(',', '.') : text
  return numberWithPoint.test(pointed) ? Number(pointed) : NaN
}

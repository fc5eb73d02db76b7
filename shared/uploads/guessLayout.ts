/** How a file is probably to be read, from its first lines. */
import { guessDecimalMark, guessDelimiter, splitCells } from '../delimitedText.ts'
import type { UploadLayout } from '../schemas/stationSetUpUploads.ts'
import { readTime } from './times.ts'

export interface KnownColumn {
  /** What the layout calls it: a sensor's letter, a quantity. */
  letter: string
  /** Other headings by which it goes, in small letters. */
  names: readonly string[]
}

export interface LayoutGuess {
  headings: string[]
  layout: UploadLayout | null
  /** Why nothing could be guessed; null where something was. */
  reason: string | null
}

const timeForms = ['iso', 'epochSeconds', 'epochMilliseconds'] as const

/** `lines`: the first of the file, without byte order mark. */
export function guessLayout(lines: readonly string[], known: readonly KnownColumn[]): LayoutGuess {
  if (lines.every((line) => line.trim() === '')) return nothing([], 'the file is empty')
  for (let above = 0; above + 1 < lines.length; above++) {
    const delimiter = guessDelimiter(lines[above])
    const headings = splitCells(lines[above], delimiter).map((cell) => cell.trim())
    const rows = lines.slice(above + 1, above + 6).filter((line) => line.trim() !== '').map((line) => splitCells(line, delimiter)) // prettier-ignore
    if (rows.length === 0 || headings.length < 2 || rows[0].length !== headings.length) continue
    const time = timeIn(rows[0])
    if (!time) continue
    if (timeIn(headings)) return nothing([], 'the file has no heading: put a line with the names of the columns above the first row') // prettier-ignore
    const columns = columnsOf(headings, known)
    if (columns.length === 0) return nothing(headings, 'no heading is that of a sensor: say which column is which')
    return {
      headings,
      reason: null,
      layout: {
        delimiter,
        decimal: guessDecimalMark(rows.flat(), delimiter),
        linesAbove: above,
        timeColumn: headings[time.at],
        clockColumn: time.clockAt === null ? null : headings[time.clockAt],
        timeForm: time.form,
        utcOffsetMinutes: 0,
        columns,
        missing: ['NaN'],
      },
    }
  }
  return nothing([], 'no row with a time was found below a heading')
}

const nothing = (headings: string[], reason: string): LayoutGuess => ({ headings, layout: null, reason })

function timeIn(
  cells: readonly string[],
): { at: number; clockAt: number | null; form: UploadLayout['timeForm'] } | null {
  for (const form of timeForms) {
    const isTime = (text: string): boolean => !Number.isNaN(readTime(text, { timeForm: form, utcOffsetMinutes: 0 }))
    const isEpoch = (text: string): boolean =>
      (form === 'epochSeconds' ? /^\s*\d{10}(?!\d)/ : /^\s*\d{13}(?!\d)/).test(text)
    const at = cells.findIndex((cell) => isTime(cell) && (form === 'iso' || isEpoch(cell)))
    if (at < 0) continue
    const clockAt = cells.findIndex((cell, n) => n !== at && /^\s*\d{1,2}:\d\d(:\d\d([.,]\d+)?)?\s*$/.test(cell))
    const isDateAlone = form === 'iso' && !cells[at].includes(':')
    return { at, clockAt: isDateAlone && clockAt >= 0 ? clockAt : null, form }
  }
  return null
}

function columnsOf(headings: readonly string[], known: readonly KnownColumn[]): UploadLayout['columns'] {
  return known.flatMap(({ letter, names }) => {
    const column = headings.find((heading) => {
      const plain = heading
        .replace(/[[(].*$/, '')
        .trim()
        .toLowerCase()
      return plain === letter.toLowerCase() || names.includes(plain)
    })
    return column === undefined ? [] : [{ column, letter, unit: unitIn(column) }]
  })
}

const units: Record<string, UploadLayout['columns'][number]['unit']> = {
  m: 'm', cm: 'cm', mm: 'mm', ft: 'ft', dbar: 'dbar', bar: 'bar', mbar: 'mbar', hpa: 'hPa', kpa: 'kPa', pa: 'Pa', psi: 'psi', 'm/s': 'm/s', kn: 'kn', '°': '°', deg: '°' } // prettier-ignore

/** `A (mbar)`, `A [m]`. */
function unitIn(heading: string): UploadLayout['columns'][number]['unit'] {
  const [, unit = ''] = /[[(]\s*([^)\]]+?)\s*[)\]]/.exec(heading) ?? []
  return units[unit.toLowerCase()] ?? null
}

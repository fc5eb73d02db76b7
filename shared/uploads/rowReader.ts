/** Lines of a logger's file to rows of readings, by a layout; what cannot be read is told by its line. */
import { readNumber, splitCells } from '../delimitedText.ts'
import type { UploadLayout } from '../schemas/stationSetUpUploads.ts'
import { readTime } from './times.ts'
import { factorOf, unitsOf } from './units.ts'
import type { ColumnKind } from './units.ts'

export interface ReadRow {
  /** ms since 1970 UTC */
  timeMs: number
  /** One a column of the layout, in its order and in the stored unit; null for missing. */
  values: (number | null)[]
}

export type RowReader = (line: string) => ReadRow | string

/** `kindOf` a letter of the layout; undefined for one that is not there. The reader, or everything that is wrong with the layout. */
export function createRowReader(
  heading: string,
  layout: UploadLayout,
  kindOf: (letter: string) => ColumnKind | undefined,
): RowReader | string[] {
  const { delimiter, decimal, missing } = layout
  const headings = splitCells(heading, delimiter).map((cell) => cell.trim())
  const faults: string[] = []
  const placeOf = (column: string): number => {
    const place = headings.indexOf(column)
    if (place < 0) faults.push(`there is no column "${column}" in the heading`)
    return place
  }
  const timeAt = placeOf(layout.timeColumn)
  const clockAt = layout.clockColumn === null ? null : placeOf(layout.clockColumn)
  const columns = layout.columns.map(({ column, letter, unit }) => {
    const kind = kindOf(letter)
    if (kind === undefined) faults.push(`there is no sensor or quantity ${letter}`)
    const factor = kind === undefined ? 1 : factorOf(kind, unit)
    if (kind !== undefined && factor === null) faults.push(`${letter} cannot be in ${unit ?? 'that unit'}; it can be in ${unitsOf(kind).join(', ')}`) // prettier-ignore
    return { column, at: placeOf(column), factor: factor ?? 1 }
  })
  const letters = layout.columns.map(({ letter }) => letter)
  const twice = letters.find((letter, n) => letters.indexOf(letter) !== n)
  if (twice !== undefined) faults.push(`${twice} is taken from two columns`)
  if (faults.length > 0) return faults

  return (line) => {
    const cells = splitCells(line, delimiter)
    if (cells.length !== headings.length) {
      return `${cells.length} cells where the heading has ${headings.length}`
    }
    const text = clockAt === null ? cells[timeAt] : `${cells[timeAt].trim()} ${cells[clockAt].trim()}`
    const timeMs = readTime(text, layout)
    if (Number.isNaN(timeMs)) return `"${text.slice(0, 40)}" is no time`
    const values: (number | null)[] = []
    for (const { column, at, factor } of columns) {
      const cell = cells[at]
      const value = missing.includes(cell.trim()) ? null : readNumber(cell, decimal)
      if (value !== null && Number.isNaN(value)) return `"${cell.trim().slice(0, 40)}" under ${column} is no number`
      values.push(value === null ? null : value * factor)
    }
    return { timeMs, values }
  }
}

/** The content of a drawing as a table: what is shown, and what a file gets. */
import type { CsvCell } from '../../../../shared/csv.ts'

export interface FiguresColumn {
  heading: string
  isNumber?: boolean
  /** Heading in the file, with the unit; that of the table if not given. */
  fileHeading?: string
}

export interface FiguresTable {
  /** Name of the drawing: `bearing ribbon`. */
  of: string
  /** Source, unit, interval: `UTC, every 20 min, 36 rows`. */
  note: string
  columns: FiguresColumn[]
  /** Cells as written on the page. */
  rows: string[][]
  /** Rows of the file, with unrounded values and ISO 8601 times; the rows of the page if not given. */
  fileRows?: CsvCell[][]
}

export const fileContent = (table: FiguresTable): CsvCell[][] => [
  table.columns.map((column) => column.fileHeading ?? column.heading),
  ...(table.fileRows ?? table.rows),
]

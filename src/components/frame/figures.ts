/** What a drawing shows, as a table: the same content for those who cannot or will not read the drawing. */
export interface FigureColumn {
  /** Heading with its unit: `From T`, `Speed m/s`. */
  title: string
  numeric?: boolean
}

export interface Figures {
  caption: string
  columns: FigureColumn[]
  rows: string[][]
}

/** RFC 4180, with a guard: a cell that a spreadsheet would run as a formula is kept as text. */
export function figuresAsCsv({ columns, rows }: Figures): string {
  const plain = (cell: string): string => cell.replaceAll('\u2212', '-').replaceAll('\u202f', '')
  const guarded = (cell: string): string => (/^[=+@\t\r]|^-(?![\d.])/.test(cell) ? `'${cell}` : cell)
  const quoted = (cell: string): string => (/[",\r\n]/.test(cell) ? `"${cell.replaceAll('"', '""')}"` : cell)
  const line = (cells: string[]): string => cells.map((cell) => quoted(guarded(plain(cell)))).join(',')
  return [line(columns.map(({ title }) => title)), ...rows.map(line)].join('\r\n') + '\r\n'
}

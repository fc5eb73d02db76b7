/**
 * Rows as comma-separated values after RFC 4180. Text that a spreadsheet would run as a formula is given a leading
 * apostrophe; numbers keep their sign.
 */
export type CsvCell = string | number | null

export const toCsv = (rows: readonly (readonly CsvCell[])[]): string =>
  rows.map((row) => row.map(written).join(',') + '\r\n').join('')

function written(cell: CsvCell): string {
  if (cell === null) return ''
  if (typeof cell === 'number') return Number.isFinite(cell) ? String(cell) : ''
  const safe = /^[=+\-@\t\r]/.test(cell) ? `'${cell}` : cell
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe
}

/**
 * A transfer table from a file: a row each of period (s), direction from (degrees true), ratio of heights, turn (degrees, clockwise), in
 * any order, every period with every direction once. Every fault by its line. Pure.
 */
import {
  guessDecimalMark,
  guessDelimiter,
  readNumber,
  splitCells,
  withoutByteOrderMark,
} from '../../../../shared/delimitedText.ts'
import type { Transfer } from '../../../../shared/schemas/placeSettings.ts'

type Table = Extract<Transfer, { kind: 'table' }>

export type TransferFile =
  | { table: Pick<Table, 'kind' | 'periods' | 'directions' | 'heightRatio' | 'turn'>; faults: null }
  | { table: null; faults: string[] }

const mostFaults = 20

export function readTransferFile(text: string): TransferFile {
  const lines = withoutByteOrderMark(text).split(/\r?\n/)
  const numbered = lines.map((line, n) => ({ line, at: n + 1 })).filter(({ line }) => line.trim() !== '')
  const [heading, ...rows] = numbered
  if (!heading || rows.length === 0) return { table: null, faults: ['The file has no rows.'] }
  const delimiter = guessDelimiter(heading.line)
  const columns = splitCells(heading.line, delimiter).map((cell) => cell.trim().toLowerCase())
  const wanted = [
    { name: 'period', is: (cell: string) => cell.startsWith('period') },
    { name: 'direction from', is: (cell: string) => cell.startsWith('direction') || cell.startsWith('from') },
    { name: 'height ratio', is: (cell: string) => cell.includes('ratio') },
    { name: 'turn', is: (cell: string) => cell.startsWith('turn') },
  ]
  const places = wanted.map(({ is }) => columns.findIndex(is))
  const missing = wanted.filter((_, n) => places[n] < 0).map(({ name }) => name)
  if (missing.length > 0) return { table: null, faults: [`Line ${heading.at}: no column for ${missing.join(', ')}.`] }
  const decimal = guessDecimalMark(
    rows.flatMap(({ line }) => splitCells(line, delimiter)),
    delimiter,
  )
  const faults: string[] = []
  const read = rows.flatMap(({ line, at }) => {
    const cells = splitCells(line, delimiter)
    const values = places.map((place) => readNumber(cells[place] ?? '', decimal))
    const bad = wanted.filter((_, n) => values[n] === null || Number.isNaN(values[n])).map(({ name }) => name)
    if (bad.length > 0) {
      faults.push(`Line ${at}: no number for ${bad.join(', ')}.`)
      return []
    }
    const [period, direction, ratio, turn] = values.map(Number)
    return [{ at, period, direction, ratio, turn }]
  })
  const rising = (values: number[]): number[] => [...new Set(values)].sort((a, b) => a - b)
  const periods = rising(read.map(({ period }) => period))
  const directions = rising(read.map(({ direction }) => direction))
  const cellOf = (period: number, direction: number) =>
    read.filter((row) => row.period === period && row.direction === direction)
  for (const period of periods) {
    for (const direction of directions) {
      const found = cellOf(period, direction)
      if (found.length === 0) faults.push(`No row for ${period} s from ${direction}°.`)
      if (found.length > 1) faults.push(`Line ${found[1].at}: ${period} s from ${direction}° stands twice.`)
    }
  }
  if (faults.length > 0) return { table: null, faults: faults.slice(0, mostFaults) }
  const matrix = (which: 'ratio' | 'turn'): number[][] =>
    periods.map((period) => directions.map((direction) => cellOf(period, direction)[0][which]))
  return {
    table: { kind: 'table', periods, directions, heightRatio: matrix('ratio'), turn: matrix('turn') },
    faults: null,
  }
}

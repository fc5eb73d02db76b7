/** A survey file as a person or an instrument wrote it: read whole, every fault told, nothing changed. */
import { guessDecimalMark, guessDelimiter, splitCells, withoutByteOrderMark } from '../delimitedText.ts'
import type { DecimalMark, Delimiter } from '../delimitedText.ts'
import type { DraftSensor } from '../schemas/stationSetUpDeployments.ts'
import type { SurveyDefaults, SurveyFault, SurveyMapping, SurveyPreview } from '../schemas/stationSetUpSurvey.ts'
import { featuresOf } from './surveyGeoJson.ts'
import { guessMapping } from './surveyFields.ts'
import { readSurveyRow } from './surveyRow.ts'
import type { SurveyRow } from './surveyRow.ts'

const mostSensors = 32

interface SurveyTable {
  form: 'csv' | 'geojson'
  delimiter: Delimiter | null
  decimal: DecimalMark
  columns: string[]
  rows: (SurveyRow & { cells: string[] })[]
  faults: SurveyFault[]
}

/** `mapping` null: guessed from the headings. Errors: none; what is wrong stands in `faults`. */
export function readSurvey(text: string, mapping: SurveyMapping | null, defaults: SurveyDefaults): SurveyPreview {
  const plain = withoutByteOrderMark(text)
  const table = /^\s*[{[]/.test(plain) ? fromGeoJson(plain) : fromCsv(plain)
  const used = mapping ?? guessMapping(table.columns, table.rows[0]?.cells ?? [])
  const { sensors, faults } = readRows(table, used, defaults)
  return {
    form: table.form,
    delimiter: table.delimiter,
    hasDecimalComma: table.decimal === ',',
    columns: table.columns,
    mapping: used,
    rows: table.rows.map(({ line, cells }) => ({ line, cells })),
    sensors,
    faults: [...table.faults, ...mappingFaults(table, used), ...faults],
  }
}

const whole = (reason: string): SurveyFault => ({ line: null, column: null, reason })

function fromCsv(text: string): SurveyTable {
  const lines = text.split(/\r\n|\n|\r/)
  const headingAt = lines.findIndex((line) => line.trim() !== '')
  const heading = lines[headingAt] ?? ''
  const delimiter = guessDelimiter(heading)
  const columns = splitCells(heading, delimiter).map((cell) => cell.trim())
  const faults: SurveyFault[] = []
  const rows: SurveyTable['rows'] = []
  lines.forEach((text, index) => {
    if (headingAt < 0 || index <= headingAt || text.trim() === '') return
    const cells = splitCells(text, delimiter)
    const line = index + 1
    if (cells.length > columns.length) {
      const reason = `${cells.length} cells under ${columns.length} headings; quote a cell that holds the delimiter`
      faults.push({ line, column: null, reason })
    }
    rows.push({ line, cells, position: null, cellOf: (column) => cells[columns.indexOf(column)] })
  })
  if (headingAt < 0) faults.push(whole('the file is empty'))
  else if (rows.length === 0) faults.push(whole('there is a heading and no row below it'))
  if (text.includes('\0') || text.includes('\uFFFD')) faults.push(whole('the file is no plain text in UTF-8; save it as CSV in UTF-8')) // prettier-ignore
  const decimal = guessDecimalMark(rows.flatMap(({ cells }) => cells), delimiter) // prettier-ignore
  return { form: 'csv', delimiter, decimal, columns, rows, faults }
}

function fromGeoJson(text: string): SurveyTable {
  const { features, faults } = featuresOf(text)
  const columns = [...new Set(features.flatMap(({ properties }) => Object.keys(properties)))]
  const rows = features.map(({ number, properties, position }) => ({
    line: number,
    position,
    cells: columns.map((column) => properties[column] ?? ''),
    cellOf: (column: string) => properties[column],
  }))
  return { form: 'geojson', delimiter: null, decimal: '.', columns, rows, faults }
}

function mappingFaults({ form, columns }: SurveyTable, mapping: SurveyMapping): SurveyFault[] {
  const faults: SurveyFault[] = []
  for (const column of new Set(Object.values(mapping))) {
    if (!columns.includes(column)) faults.push(whole(`there is no column "${column}"`))
  }
  if (columns.every((column) => column === '')) return faults
  if (mapping.letter === undefined) faults.push(whole('no column names the sensors; say which one does'))
  const pairs = [['east', 'north'], ['latitude', 'longitude'], ['range', 'bearing']] as const // prettier-ignore
  const hasPosition = pairs.some(([a, b]) => mapping[a] !== undefined && mapping[b] !== undefined)
  if (!hasPosition && form === 'csv') faults.push(whole('no columns hold the positions; say which are east and north, latitude and longitude, or range and bearing')) // prettier-ignore
  return faults
}

function readRows(
  { rows, decimal }: SurveyTable,
  mapping: SurveyMapping,
  defaults: SurveyDefaults,
): { sensors: DraftSensor[]; faults: SurveyFault[] } {
  const sensors: DraftSensor[] = []
  const faults: SurveyFault[] = []
  if (mapping.letter === undefined) return { sensors, faults }
  for (const row of rows) {
    const read = readSurveyRow(row, { mapping, decimal, defaults })
    if (Array.isArray(read)) faults.push(...read)
    else if (isTwice(sensors, read))
      faults.push({ line: row.line, column: mapping.letter, reason: `sensor ${read.letter} is there twice` }) // prettier-ignore
    else sensors.push(read)
  }
  if (rows.length > mostSensors) faults.push(whole(`${rows.length} rows; an array has at most ${mostSensors} sensors`))
  return { sensors, faults }
}

const isTwice = (sensors: readonly DraftSensor[], { letter }: DraftSensor): boolean =>
  sensors.some((sensor) => sensor.letter.toLowerCase() === letter.toLowerCase())

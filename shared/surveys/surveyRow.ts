/** One row of a survey to a sensor, or what is wrong with it. */
import { readNumber } from '../delimitedText.ts'
import type { DecimalMark } from '../delimitedText.ts'
import { draftSensor } from '../schemas/stationSetUpDeployments.ts'
import type { DraftSensor, SensorPosition } from '../schemas/stationSetUpDeployments.ts'
import type { SurveyDefaults, SurveyFault, SurveyField, SurveyMapping } from '../schemas/stationSetUpSurvey.ts'

export interface SurveyRow {
  line: number
  /** The cell under a heading; undefined: the row has none. */
  cellOf(column: string): string | undefined
  /** Of GeoJSON: where the feature stands, unless columns say otherwise. */
  position: SensorPosition | null
}

export interface RowReading {
  mapping: SurveyMapping
  decimal: DecimalMark
  defaults: SurveyDefaults
}

/** Collects every fault of the row before it gives up. */
export function readSurveyRow(row: SurveyRow, { mapping, decimal, defaults }: RowReading): DraftSensor | SurveyFault[] {
  const faults: SurveyFault[] = []
  const fault = (column: string | null, reason: string): void => void faults.push({ line: row.line, column, reason })
  const text = (field: SurveyField): string | undefined => {
    const column = mapping[field]
    const cell = column === undefined ? undefined : row.cellOf(column)?.trim()
    return cell === '' ? undefined : cell
  }
  const figure = (field: SurveyField): number | undefined => {
    const cell = text(field)
    const value = cell === undefined ? null : readNumber(cell, decimal)
    if (value !== null && Number.isNaN(value)) {
      const hint = decimal === ',' ? ', with a decimal comma as in the other cells' : ''
      fault(mapping[field] ?? null, `"${cell?.slice(0, 40)}" is no number; write it as digits${hint}`)
    }
    return value === null || Number.isNaN(value) ? undefined : value
  }
  const choice = <Choice extends string>(field: SurveyField, choices: readonly Choice[], usual: Choice): Choice => {
    const cell = text(field)?.toLowerCase()
    if (cell === undefined) return usual
    const found = choices.find((one) => one === cell)
    if (!found) fault(mapping[field] ?? null, `"${cell.slice(0, 40)}" is neither ${choices.join(' nor ')}`)
    return found ?? usual
  }

  const letter = text('letter')
  if (letter === undefined) fault(mapping.letter ?? null, 'the row names no sensor; give each sensor its id')
  const position = positionIn(figure, row.position)
  if (typeof position === 'string') {
    if (faults.length === 0) fault(null, position)
  }
  const level = figure('level')
  const sensor = {
    letter: letter ?? '',
    serial: text('serial') ?? letter ?? '',
    kind: choice('kind', ['pressure', 'surface'], defaults.kind),
    position,
    heightAboveBed: figure('heightAboveBed') ?? (level === undefined ? defaults.heightAboveBed : level - defaults.levelOfBed), // prettier-ignore
    positionSd: figure('positionSd') ?? defaults.positionSd,
    clockSd: figure('clockSd') ?? defaults.clockSd,
    scale: figure('scale') ?? 1,
    offset: figure('offset') ?? 0,
    pressureKind: choice('pressureKind', ['gauge', 'absolute'], defaults.pressureKind),
  }
  if (faults.length > 0) return faults
  const parsed = draftSensor.safeParse(sensor)
  if (parsed.success) return parsed.data
  return parsed.error.issues.map(({ path, message }) => ({
    line: row.line,
    column: columnOf(path, mapping, level !== undefined),
    reason: reasonOf(path, message, sensor.heightAboveBed),
  }))
}

/** A position in one of the three ways; a sentence where none is whole. */
function positionIn(
  figure: (field: SurveyField) => number | undefined,
  ofFeature: SensorPosition | null,
): SensorPosition | string {
  const [east, north] = [figure('east'), figure('north')]
  if (east !== undefined && north !== undefined) return { by: 'grid', east, north }
  const [latitude, longitude] = [figure('latitude'), figure('longitude')]
  if (latitude !== undefined && longitude !== undefined) return { by: 'geographic', latitude, longitude }
  const [range, bearing] = [figure('range'), figure('bearing')]
  if (range !== undefined && bearing !== undefined) return { by: 'polar', range, bearing, from: null }
  return ofFeature ?? 'the row has no position: give east and north, latitude and longitude, or range and true bearing'
}

function columnOf([field, part]: PropertyKey[], mapping: SurveyMapping, isLevel: boolean): string | null {
  const name = field === 'position' ? part : field === 'heightAboveBed' && isLevel ? 'level' : field
  return Object.entries(mapping).find(([known]) => known === name)?.[1] ?? null
}

function reasonOf([field]: PropertyKey[], message: string, height: number): string {
  if (field === 'position') return `${message}; give metres from the station's position, or latitude and longitude`
  if (field !== 'heightAboveBed') return message
  return height < 0
    ? `${height.toFixed(2)} m lies below the bed; if it is a level against datum map it as level`
    : message
}

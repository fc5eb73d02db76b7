/** A survey of an array as it is typed, and its way from and to the contract. Pure. */
import { deploymentDraftContent } from '../../../shared/schemas/stationSetUpDeployments.ts'
import type {
  DeploymentDraftContent,
  DeploymentRecord,
  DraftSensor,
  PlacedSensor,
  SensorPosition,
} from '../../../shared/schemas/stationSetUpDeployments.ts'
import { numberIn } from '../limits/limitForm.ts'
import { degreesIn, degreesTyped } from './degrees.ts'
import { faultsOf } from './formFaults.ts'

export interface SensorRow {
  /** Stays while the letter is being typed. */
  key: string
  letter: string
  serial: string
  kind: DraftSensor['kind']
  by: SensorPosition['by']
  east: string
  north: string
  latitude: string
  longitude: string
  range: string
  bearing: string
  /** Letter of the sensor that range and bearing are from; empty: the station's position. */
  from: string
  heightAboveBed: string
  positionSd: string
  clockSd: string
  scale: string
  offset: string
  pressureKind: DraftSensor['pressureKind']
}

export interface SurveyForm {
  waterDepth: string
  levelOfBed: string
  surveyedOn: string
  notes: string
  sensors: SensorRow[]
}

/** A figure with its minus as people read it; at most `places` decimals, at least `least`. */
export function figureTyped(value: number, places = 2, least = 0): string {
  const text = String(Number(value.toFixed(places)))
  const [whole, fraction = ''] = text.split('.')
  const padded = fraction.padEnd(least, '0')
  return `${whole.replace('-', '\u2212')}${padded ? `.${padded}` : ''}`
}
export const gridTyped = (metres: number): string => figureTyped(metres, 2, 2)

export function rowOf(sensor: DraftSensor & { east?: number; north?: number }, key: string): SensorRow {
  const { position } = sensor
  const blank = { east: '', north: '', latitude: '', longitude: '', range: '', bearing: '', from: '' }
  const own =
    position.by === 'grid'
      ? { east: gridTyped(position.east), north: gridTyped(position.north) }
      : position.by === 'geographic'
        ? { latitude: degreesTyped(position.latitude), longitude: degreesTyped(position.longitude) }
        : { range: figureTyped(position.range), bearing: figureTyped(position.bearing, 3), from: position.from ?? '' }
  return {
    ...{ key, letter: sensor.letter, serial: sensor.serial, kind: sensor.kind, by: position.by, ...blank, ...own },
    heightAboveBed: figureTyped(sensor.heightAboveBed, 3, 2),
    positionSd: figureTyped(sensor.positionSd, 3, 2),
    clockSd: figureTyped(sensor.clockSd, 4),
    scale: figureTyped(sensor.scale, 9),
    offset: figureTyped(sensor.offset, 6),
    pressureKind: sensor.pressureKind,
  }
}

export const surveyFormOf = (content: DeploymentDraftContent): SurveyForm => ({
  waterDepth: figureTyped(content.waterDepth),
  levelOfBed: figureTyped(content.levelOfBed),
  surveyedOn: content.surveyedOn ?? '',
  notes: content.notes,
  sensors: content.sensors.map((sensor, index) => rowOf(sensor, `s${index + 1}`)),
})

/** A version as the beginning of the next one: surveyed anew, so without its day and notes. */
export const contentOfVersion = (version: DeploymentRecord): DeploymentDraftContent => ({
  ...{ waterDepth: version.waterDepth, levelOfBed: version.levelOfBed, surveyedOn: null, notes: '' },
  sensors: version.sensors.map(draftOf),
})

export function draftOf(sensor: PlacedSensor): DraftSensor {
  const { letter, serial, kind, position, heightAboveBed, positionSd, clockSd, scale, offset, pressureKind } = sensor
  return { letter, serial, kind, position, heightAboveBed, positionSd, clockSd, scale, offset, pressureKind }
}

export const emptySurvey = (): SurveyForm => ({
  ...{ waterDepth: '10', levelOfBed: '\u221210', surveyedOn: '', notes: '', sensors: [] },
})

/** The next sensor: named after the others, near the middle, with what most of the others have. */
export function nextRow({ sensors }: SurveyForm, code: string, at: { east: number; north: number }): SensorRow {
  const numbers = sensors.map((one) => Number(/(\d+)$/.exec(one.letter)?.[1] ?? 0))
  const number = Math.max(0, ...numbers) + 1
  const keys = sensors.map((one) => Number(one.key.slice(1)))
  const like = sensors.at(-1)
  return {
    ...rowOf(
      {
        ...{ letter: `${code}-${number}`, serial: '', kind: like?.kind ?? 'pressure', heightAboveBed: 0.5 },
        position: { by: 'grid', ...at },
        ...{ positionSd: 0.05, clockSd: 0.005, scale: 1, offset: 0, pressureKind: like?.pressureKind ?? 'gauge' },
      },
      `s${Math.max(0, ...keys) + 1}`,
    ),
    ...(like && { heightAboveBed: like.heightAboveBed, positionSd: like.positionSd, clockSd: like.clockSd }),
  }
}

function positionOf(row: SensorRow): unknown {
  if (row.by === 'grid') return { by: 'grid', east: numberIn(row.east), north: numberIn(row.north) }
  if (row.by === 'geographic') {
    const [latitude, longitude] = [degreesIn(row.latitude, 'latitude'), degreesIn(row.longitude, 'longitude')]
    return { by: 'geographic', latitude, longitude }
  }
  return { by: 'polar', range: numberIn(row.range), bearing: numberIn(row.bearing), from: row.from || null }
}

const sensorOf = (row: SensorRow): unknown => ({
  ...{ letter: row.letter, serial: row.serial, kind: row.kind, position: positionOf(row) },
  heightAboveBed: numberIn(row.heightAboveBed),
  positionSd: numberIn(row.positionSd),
  clockSd: numberIn(row.clockSd),
  scale: numberIn(row.scale),
  offset: numberIn(row.offset),
  pressureKind: row.pressureKind,
})

export type SurveyResult =
  { content: DeploymentDraftContent; faults: null } | { content: null; faults: Record<string, string> }

/** Faults by the names of the contract, `sensors.2.position.east`. */
export function surveyOf(form: SurveyForm): SurveyResult {
  const parsed = deploymentDraftContent.safeParse({
    waterDepth: numberIn(form.waterDepth),
    levelOfBed: numberIn(form.levelOfBed),
    surveyedOn: form.surveyedOn || null,
    notes: form.notes,
    sensors: form.sensors.map(sensorOf),
  })
  if (parsed.success) return { content: parsed.data, faults: null }
  return { content: null, faults: faultsOf(parsed.error) }
}

/** Faults of one sensor by the names of its fields, `east` for `sensors.2.position.east`. */
export function faultsOfRow(faults: Record<string, string>, index: number): Record<string, string> {
  const own: Record<string, string> = {}
  for (const [path, words] of Object.entries(faults))
    if (path.startsWith(`sensors.${index}.`)) own[path.split('.').at(-1) ?? path] = words
  return own
}

export const moveTo = (row: SensorRow, to: { east: number; north: number }): SensorRow => ({
  ...row,
  ...{ by: 'grid', east: gridTyped(to.east), north: gridTyped(to.north) },
})

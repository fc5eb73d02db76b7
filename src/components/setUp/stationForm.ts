/** A station's own fields as they are typed, and their way from and to the contract. Pure. */
import { stationChange } from '../../../shared/schemas/stationSetUp.ts'
import type { StationChange, StationRecord } from '../../../shared/schemas/stationSetUp.ts'
import { numberIn } from '../limits/limitForm.ts'
import { degreesIn, degreesTyped } from './degrees.ts'
import { faultsOf } from './formFaults.ts'

export interface StationForm {
  code: string
  shortName: string
  name: string
  latitude: string
  longitude: string
  datumName: string
  datumOffset: string
  datumSurveyedOn: string
  /** min */
  staleAfter: string
  state: 'active' | 'maintenance'
  notes: string
}

/** In the order of the form; also how a difference between two editors is told. */
export const stationLabels: Record<keyof StationForm, string> = {
  name: 'Full name',
  shortName: 'Short name',
  code: 'Code',
  state: 'State',
  latitude: 'Latitude',
  longitude: 'Longitude',
  datumName: 'Datum of its levels',
  datumOffset: 'Datum above the national datum, m',
  datumSurveyedOn: 'Offset surveyed on',
  staleAfter: 'Stale after, min',
  notes: 'Notes',
}

export const newStationForm = (): StationForm => ({
  ...{ code: '', shortName: '', name: '', latitude: '', longitude: '', datumName: 'chart datum', datumOffset: '0' },
  ...{ datumSurveyedOn: '', staleAfter: '15', state: 'maintenance', notes: '' },
})

export const stationFormOf = (record: StationRecord): StationForm => ({
  ...{ code: record.code, shortName: record.shortName, name: record.name, datumName: record.datumName },
  latitude: degreesTyped(record.latitude),
  longitude: degreesTyped(record.longitude),
  datumOffset: String(record.datumOffset),
  datumSurveyedOn: record.datumSurveyedOn ?? '',
  staleAfter: String(record.staleAfterSeconds / 60),
  state: record.state === 'active' ? 'active' : 'maintenance',
  notes: record.notes,
})

export type StationFields = Omit<StationChange, 'reason'>
const fields = stationChange.omit({ reason: true })

export type StationFormResult =
  { fields: StationFields; faults: null } | { fields: null; faults: Record<string, string> }

/** Faults by the names of the contract, such as `staleAfterSeconds`. */
export function stationFieldsOf(form: StationForm, areaPolygon: StationRecord['areaPolygon']): StationFormResult {
  const parsed = fields.safeParse({
    ...{ code: form.code, shortName: form.shortName, name: form.name, datumName: form.datumName, notes: form.notes },
    latitude: degreesIn(form.latitude, 'latitude'),
    longitude: degreesIn(form.longitude, 'longitude'),
    datumOffset: numberIn(form.datumOffset),
    datumSurveyedOn: form.datumSurveyedOn || null,
    staleAfterSeconds: Math.round(numberIn(form.staleAfter) * 60),
    ...{ state: form.state, areaPolygon },
  })
  if (parsed.success) return { fields: parsed.data, faults: null }
  const faults = faultsOf(parsed.error, { staleAfterSeconds: 60 })
  for (const axis of ['latitude', 'longitude'] as const)
    if (faults[axis] === 'must be a number') faults[axis] = 'degrees, such as 47.4865 or 47° 29.19′ N'
  return { fields: null, faults }
}

export interface Difference {
  label: string
  mine: string
  theirs: string
}

/** Fields in which two forms differ. */
export function differencesOf<T extends object>(
  labels: Record<keyof T & string, string>,
  mine: T,
  theirs: T,
): Difference[] {
  const keys = Object.keys(labels) as (keyof T & string)[]
  const words = (value: unknown): string => {
    const text = typeof value === 'object' ? JSON.stringify(value) : String(value)
    return text === '' ? 'nothing' : text
  }
  return keys
    .filter((key) => words(mine[key]) !== words(theirs[key]))
    .map((key) => ({ label: labels[key], mine: words(mine[key]), theirs: words(theirs[key]) }))
}

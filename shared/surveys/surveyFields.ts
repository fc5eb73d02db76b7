/** Which column of a survey is which: guessed from the headings, corrected by a person. */
import type { SurveyField, SurveyMapping } from '../schemas/stationSetUpSurvey.ts'

/** Headings in use for each field, in small letters without units. */
const headings: Record<SurveyField, readonly string[]> = {
  letter: ['sensor', 'letter', 'id', 'name', 'point', 'label'],
  serial: ['serial', 'serial number', 'serial no', 's/n', 'instrument'],
  kind: ['kind', 'type', 'sensor type'],
  east: ['east', 'easting', 'e', 'x', 'dx'],
  north: ['north', 'northing', 'n', 'y', 'dy'],
  latitude: ['latitude', 'lat'],
  longitude: ['longitude', 'lon', 'long', 'lng'],
  range: ['range', 'distance', 'dist'],
  bearing: ['bearing', 'true bearing', 'azimuth', 'brg'],
  heightAboveBed: ['height above bed', 'above bed', 'height', 'heightabovebed'],
  level: ['level', 'z', 'elevation', 'reduced level', 'rl', 'height above datum'],
  positionSd: ['one sigma', 'sigma', 'sd', 'position sd', 'positionsd', 'accuracy'],
  clockSd: ['clock sd', 'clocksd', 'clock sigma'],
  scale: ['scale', 'gain'],
  offset: ['offset', 'zero'],
  pressureKind: ['pressure kind', 'pressurekind', 'gauge or absolute'],
}

const plain = (heading: string): string =>
  heading
    .toLowerCase()
    .replace(/[[(].*?[\])]/g, '')
    .replace(/[_-]+/g, ' ')
    .replace(/,.*$/, '')
    .replace(/\s+/g, ' ')
    .trim()

export const surveyFields = Object.keys(headings) as SurveyField[]

/** `firstCells` are those of the first row: a "height" below nought is a level against datum. */
export function guessMapping(columns: readonly string[], firstCells: readonly string[]): SurveyMapping {
  const mapping: SurveyMapping = {}
  for (const field of surveyFields) {
    const column = columns.find((name) => headings[field].includes(plain(name)))
    if (column !== undefined && !Object.values(mapping).includes(column)) mapping[field] = column
  }
  const height = mapping.heightAboveBed
  if (height !== undefined && mapping.level === undefined) {
    if (/^\s*[-\u2212]/.test(firstCells[columns.indexOf(height)] ?? '')) {
      delete mapping.heightAboveBed
      mapping.level = height
    }
  }
  return mapping
}

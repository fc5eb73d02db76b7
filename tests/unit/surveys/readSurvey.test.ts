import { describe, expect, test } from 'vitest'
import { readSurvey } from '../../../shared/surveys/readSurvey.ts'
import type { SurveyDefaults } from '../../../shared/schemas/stationSetUpSurvey.ts'

const defaults: SurveyDefaults = {
  kind: 'pressure',
  heightAboveBed: 0.5,
  positionSd: 0.05,
  clockSd: 0.002,
  pressureKind: 'gauge',
  levelOfBed: -14.6,
}
const read = (text: string, mapping: Parameters<typeof readSurvey>[1] = null) => readSurvey(text, mapping, defaults)

describe('a survey', () => {
  test('with commas is read by its headings, units in brackets passed over', () => {
    const { sensors, faults, mapping } = read('Sensor,East (m),North (m),Height,One sigma\nOL-1,-44.00,-20.00,0.58,0.05\nOL-2,-6,-44,0.61,0.06\n') // prettier-ignore
    expect(faults).toEqual([])
    expect(mapping).toEqual({ letter: 'Sensor', east: 'East (m)', north: 'North (m)', heightAboveBed: 'Height', positionSd: 'One sigma' }) // prettier-ignore
    expect(sensors[1]).toMatchObject({ letter: 'OL-2', position: { by: 'grid', east: -6, north: -44 }, heightAboveBed: 0.61, positionSd: 0.06 }) // prettier-ignore
  })

  test('with semicolons, decimal commas, a byte order mark and Windows line ends is the same', () => {
    const { sensors, faults, hasDecimalComma, delimiter } = read(
      '\uFEFFsensor;east;north;level\r\nA;-44,25;"-20,5";-14,02\r\n',
    )
    expect({ faults, hasDecimalComma, delimiter }).toEqual({ faults: [], hasDecimalComma: true, delimiter: ';' })
    expect(sensors[0]?.position).toEqual({ by: 'grid', east: -44.25, north: -20.5 })
    expect(sensors[0]?.heightAboveBed).toBeCloseTo(0.58, 9)
  })

  test('whose heights are below nought is taken for levels against datum', () => {
    const { mapping, sensors } = read('sensor\teast\tnorth\theight\nA\t1\t2\t-14.1\n')
    expect(mapping.level).toBe('height')
    expect(sensors[0]?.heightAboveBed).toBeCloseTo(0.5, 9)
  })

  test('by range and true bearing, or by latitude and longitude, is kept as it was measured', () => {
    expect(read('id,range,bearing\nA,12.5,271\n').sensors[0]?.position).toEqual({ by: 'polar', range: 12.5, bearing: 271, from: null }) // prettier-ignore
    expect(read('id,lat,lon\nA,47.5,-21.02\n').sensors[0]?.position).toEqual({ by: 'geographic', latitude: 47.5, longitude: -21.02 }) // prettier-ignore
  })

  test('takes the mapping that a person gives before its own', () => {
    const { sensors, faults } = read('p,a,b\nA,3,4\n', { letter: 'p', east: 'b', north: 'a' })
    expect(faults).toEqual([])
    expect(sensors[0]?.position).toEqual({ by: 'grid', east: 4, north: 3 })
  })

  test('in GeoJSON stands at its points', () => {
    const feature = (id: string, coordinates: number[]) => ({ type: 'Feature', geometry: { type: 'Point', coordinates }, properties: { id, serial: 4101 } }) // prettier-ignore
    const { form, sensors, faults } = read(JSON.stringify({ type: 'FeatureCollection', features: [feature('A', [-21.02, 47.5]), feature('B', [-21.01, 47.6, -14])] })) // prettier-ignore
    expect({ form, faults }).toEqual({ form: 'geojson', faults: [] })
    expect(sensors.map(({ letter, serial, position }) => [letter, serial, position])).toEqual([
      ['A', '4101', { by: 'geographic', latitude: 47.5, longitude: -21.02 }],
      ['B', '4101', { by: 'geographic', latitude: 47.6, longitude: -21.01 }],
    ])
  })
})

const row = (line: number | null, column: string | null, reason: string) => ({ line, column, reason })

/** Each file is told where it is broken and how to mend it. */
describe('a broken survey', () => {
  test.each<[string, string, ReturnType<typeof row>[]]>([
    ['empty', '', [row(null, null, 'the file is empty')]],
    ['without rows', 'sensor,east,north\n', [row(null, null, 'there is a heading and no row below it')]],
    ['with a word for a number', 'sensor,east,north\nA,1,2\nB,tree,2\n', [row(3, 'east', '"tree" is no number; write it as digits')]], // prettier-ignore
    ['with a sensor twice', 'sensor,east,north\nA,1,2\na,3,4\n', [row(3, 'sensor', 'sensor a is there twice')]],
    ['without a name', 'sensor,east,north\n,1,2\n', [row(2, 'sensor', 'the row names no sensor; give each sensor its id')]], // prettier-ignore
    ['with half a position', 'sensor,east,north\nA,1,\n', [row(2, null, 'the row has no position: give east and north, latitude and longitude, or range and true bearing')]], // prettier-ignore
    ['with unquoted commas', 'sensor,east,north\nA,1,5,2,5\n', [row(2, null, '5 cells under 3 headings; quote a cell that holds the delimiter')]], // prettier-ignore
    ['below the bed', 'sensor,east,north,height above bed\nB,0,0,1\nA,1,2,-3\n', [row(3, 'height above bed', '-3.00 m lies below the bed; if it is a level against datum map it as level')]], // prettier-ignore
    ['of GeoJSON cut short', '{"type":"FeatureCollection","features":[', [row(null, null, 'the file begins like JSON and is none; export it again as GeoJSON')]], // prettier-ignore
    ['of JSON that is no GeoJSON', '{"a":1}', [row(null, null, 'the file is no GeoJSON FeatureCollection')]],
  ])('%s says so', (_, text, faults) => {
    expect(read(text).faults).toEqual(faults)
  })

  test('on a national grid is told to give metres from the station', () => {
    const [fault] = read('sensor,easting,northing\nA,443210.5,1180332.1\n').faults
    expect(fault).toMatchObject({ line: 2, column: 'easting' })
    expect(fault?.reason).toMatch(/give metres from the station's position, or latitude and longitude/)
  })

  test('with latitude and longitude exchanged says which is beyond the pole', () => {
    const features = [
      { type: 'Feature', geometry: { type: 'Point', coordinates: [47.5, -121] }, properties: { id: 'A' } },
    ]
    expect(read(JSON.stringify({ type: 'FeatureCollection', features })).faults).toContainEqual(row(1, null, 'latitude -121 is beyond a pole; GeoJSON puts longitude first')) // prettier-ignore
  })

  test('keeps the sensors of its good rows for the preview', () => {
    const { sensors, rows } = read('sensor,east,north\nA,1,2\nB,tree,2\nC,5,6\n')
    expect(sensors.map(({ letter }) => letter)).toEqual(['A', 'C'])
    expect(rows).toHaveLength(3)
  })

  test('without the columns that matter names what is missing', () => {
    expect(read('point no,colour\n1,red\n').faults.map(({ reason }) => reason)).toEqual([
      'no column names the sensors; say which one does',
      'no columns hold the positions; say which are east and north, latitude and longitude, or range and bearing',
    ])
  })
})

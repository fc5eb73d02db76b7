/** What people type on the pages of set-up, and what becomes of it. */
import { describe, expect, it } from 'vitest'
import { degreesIn, degreesTyped, degreesWords } from '../../../src/components/setUp/degrees.ts'
import { draftDifferences } from '../../../src/components/setUp/arrayWords.ts'
import { newSettingsForm, settingsChanges, settingsOf } from '../../../src/components/setUp/settingsForm.ts'
import { differencesOf, newStationForm, stationFieldsOf, stationLabels } from '../../../src/components/setUp/stationForm.ts' // prettier-ignore
import {
  contentOfVersion,
  emptySurvey,
  figureTyped,
  moveTo,
  nextRow,
  rowOf,
  surveyFormOf,
  surveyOf,
} from '../../../src/components/setUp/surveyForm.ts'
import type { SurveyForm } from '../../../src/components/setUp/surveyForm.ts'
import { layoutOf, minutesOfZone, uploadFormOf } from '../../../src/components/setUp/uploadForm.ts'
import { draftSensor } from './setUpViews.ts'

describe('degrees', () => {
  it.each([
    ['47.4865', 'latitude', 47.4865],
    ['−21,0222', 'longitude', -21.0222],
    ['47° 29.19′ N', 'latitude', 47.4865],
    ['21 1 19.92 W', 'longitude', -21.0222],
    ['21°01.332W', 'longitude', -21.0222],
  ] as const)('typed as %s are read', (typed, axis, degrees) => {
    expect(degreesIn(typed, axis)).toBeCloseTo(degrees, 6)
  })

  it.each([
    ['', 'latitude'],
    ['47 61 N', 'latitude'],
    ['47 N', 'longitude'],
    ['-47 S', 'latitude'],
    ['north', 'latitude'],
  ] as const)('typed as "%s" are none of a %s', (typed, axis) => {
    expect(degreesIn(typed, axis)).toBeNaN()
  })

  it('in words are read back to a metre', () => {
    for (const value of [0, 47.4865, -21.0222, 89.99999, -0.5]) {
      expect(degreesIn(degreesWords(value, 'latitude'), 'latitude')).toBeCloseTo(value, 4)
      expect(degreesIn(degreesTyped(value), 'latitude')).toBeCloseTo(value, 6)
    }
    expect(degreesWords(59.9999999, 'longitude')).toBe('60° 00.000′ E')
  })
})

const filled = () => ({ ...newStationForm(), code: 'TR', shortName: 'Roads', name: 'Trial Roads', latitude: '47.5', longitude: '-21' }) // prettier-ignore

describe('the form of a station', () => {
  it('gives minutes as seconds and the date only where there is one', () => {
    const { fields } = stationFieldsOf({ ...filled(), staleAfter: '12,5' }, null)
    expect(fields).toMatchObject({
      staleAfterSeconds: 750,
      datumSurveyedOn: null,
      longitude: -21,
      state: 'maintenance',
    })
  })

  it('names what is wrong by field, in the units that are typed', () => {
    const { faults } = stationFieldsOf({ ...filled(), name: ' ', code: 'T R', latitude: '95', staleAfter: '0.5' }, null)
    expect(faults).toEqual({
      name: 'a name is needed',
      code: '1 to 16 letters, digits or dashes, beginning with a letter or digit',
      latitude: 'must be at most 90',
      staleAfterSeconds: 'must be at least 1',
    })
  })

  it('tells two editors apart field by field', () => {
    const theirs = { ...filled(), notes: 'cable renewed' }
    expect(differencesOf(stationLabels, filled(), theirs)).toEqual([
      { label: 'Notes', mine: 'nothing', theirs: 'cable renewed' },
    ])
  })
})

describe('the form of how a station is read', () => {
  it('begins with settings that fit', () => {
    const { settings } = settingsOf(newSettingsForm())
    expect(settings).toMatchObject({ sampleRate: 4, content: { windowSeconds: 1200, hopSeconds: 60, periodRange: [4, 20] } }) // prettier-ignore
    expect(settings?.content.estimate).toMatchObject({ leastCompleteness: 0.8, leastPressureResponse: 0.15 })
    expect(settings?.content.openSeaSector).toBeUndefined()
    expect(settings?.content.estimate.quality).toBeUndefined()
  })

  it('keeps own thresholds of quality where they are wanted, shares typed as per cent', () => {
    const form = { ...newSettingsForm(), hasQuality: true }
    form.quality.figures.suspectCompleteness = '95'
    form.quality.spans.depthSpan = { from: '12', to: '16' }
    const { settings } = settingsOf(form)
    expect(settings?.content.estimate.quality).toMatchObject({ suspectCompleteness: 0.95, depthSpan: [12, 16], instrumentSpan: null }) // prettier-ignore
  })

  it('refuses a window under five minutes, a hop longer than it, bearings past 360 and periods the wrong way round', () => {
    const form = { ...newSettingsForm(), window: '4', hop: '400', land: [{ from: '-1', to: '90' }], periodFrom: '20', periodTo: '4' } // prettier-ignore
    expect(settingsOf(form).faults).toMatchObject({
      'content.windowSeconds': 'must be at least 5',
      'content.hopSeconds': 'must not be longer than the window',
      'content.landSectors.0.0': 'a bearing from 0 to 360',
      'content.periodRange.1': 'must be longer than the shortest',
    })
  })

  it('says what changed', () => {
    const before = settingsOf(newSettingsForm()).settings
    const form = { ...newSettingsForm(), sampleRate: '2', land: [{ from: '330', to: '150' }], hasQuality: true }
    form.quality.figures.headingChange = '45'
    const after = settingsOf(form).settings
    expect(before && after && settingsChanges(before, after)).toEqual([
      'Sample rate 4 to 2 Hz',
      'Land none to 330° to 150° T',
      'Heading changes by 60 to 45 °',
    ])
  })
})

describe('the form of a survey', () => {
  const survey = (): SurveyForm => ({
    ...emptySurvey(),
    sensors: [rowOf(draftSensor('A', 0, 0), 's1'), rowOf(draftSensor('B', 14, -3.456), 's2')],
  })

  it('writes a true minus and two decimals, and reads them back', () => {
    expect(survey().sensors[1]).toMatchObject({ east: '14.00', north: '\u22123.46', positionSd: '0.05' })
    expect(surveyOf(survey()).content?.sensors[1].position).toEqual({ by: 'grid', east: 14, north: -3.46 })
    expect(figureTyped(0.0001, 4)).toBe('0.0001')
    expect(figureTyped(-0.001, 2, 2)).toBe('0.00')
  })

  it('names the sensor and the cell that cannot be read, and letters that are there twice', () => {
    const form = survey()
    form.sensors[0] = { ...form.sensors[0], north: 'wide' }
    expect(surveyOf(form).faults).toEqual({ 'sensors.0.position.north': 'must be a number' })
    const twice = survey()
    twice.sensors[1] = { ...twice.sensors[1], letter: 'a' }
    expect(surveyOf(twice).faults).toEqual({ 'sensors.1.letter': 'a is there twice' })
  })

  it('stands on the grid once a sensor is moved by hand, however it was surveyed', () => {
    const polar = { ...survey().sensors[0], by: 'polar' as const, range: '10', bearing: '90' }
    expect(moveTo(polar, { east: -2, north: 3 })).toMatchObject({ by: 'grid', east: '\u22122.00', north: '3.00' })
  })

  it('names the next sensor after the others and takes over what they share', () => {
    const form = surveyFormOf({ waterDepth: 10, levelOfBed: -10, surveyedOn: null, notes: '', sensors: [draftSensor('OL-4', 0, 0)] }) // prettier-ignore
    expect(nextRow(form, 'OL', { east: 1, north: 2 })).toMatchObject({ letter: 'OL-5', serial: '', kind: 'surface', heightAboveBed: '10.00' }) // prettier-ignore
  })

  it('copies a version without its day and notes, and tells two drafts apart by sensor', () => {
    const sensor = { ...draftSensor('A', 0, 0), east: 0, north: 0, sensorId: 1 }
    const version = {
      ...{ id: 1, number: 1, validFrom: '2026-10-02T00:00:00Z', validUntil: null, isInForce: true },
      ...{ recordedAt: '2026-10-02T00:00:00Z', replacesId: null, waterDepth: 10, levelOfBed: -10 },
      ...{ surveyedOn: '2026-10-01', notes: 'calm', author: null, reason: 'first', resolved: [], sensors: [sensor] },
    }
    const mine = contentOfVersion(version)
    expect(mine).toMatchObject({ surveyedOn: null, notes: '', sensors: [draftSensor('A', 0, 0)] })
    const theirs = { ...mine, sensors: [draftSensor('A', 0.5, 0), draftSensor('B', 3, 3)] }
    expect(draftDifferences(mine, theirs).map(({ label }) => label)).toEqual(['A', 'B'])
    expect(draftDifferences(mine, theirs)[1].mine).toBe('not there')
  })
})

describe('the form of a file', () => {
  it('reads a zone with its sign and refuses what is none', () => {
    expect([minutesOfZone('+01:00'), minutesOfZone('\u221203:30'), minutesOfZone('0')]).toEqual([60, -210, 0])
    expect(minutesOfZone('CET')).toBeNaN()
  })

  it('asks for a column at least, and leaves out columns that hold nothing to read', () => {
    const form = uploadFormOf(null, ['time', 'A', 'battery'])
    expect(layoutOf(form).faults).toEqual({ columns: 'say of one column at least what it holds' })
    form.columns.A = { letter: 'OL-1', unit: 'mbar' }
    expect(layoutOf(form).layout?.columns).toEqual([{ column: 'A', letter: 'OL-1', unit: 'mbar' }])
  })
})

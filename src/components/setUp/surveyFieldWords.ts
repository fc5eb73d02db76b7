/** Columns of a survey file, in words, in the order they are asked for. */
import type { SurveyField } from '../../../shared/schemas/stationSetUpSurvey.ts'

export const surveyFieldWords: Record<SurveyField, string> = {
  letter: 'Sensor',
  serial: 'Serial number',
  kind: 'Kind',
  east: 'East, m',
  north: 'North, m',
  latitude: 'Latitude',
  longitude: 'Longitude',
  range: 'Range, m',
  bearing: 'True bearing',
  heightAboveBed: 'Height above the bed, m',
  level: 'Height against datum, m',
  positionSd: 'Position, one sigma, m',
  clockSd: 'Clock, one sigma, s',
  scale: 'Scale',
  offset: 'Offset',
  pressureKind: 'Gauge or absolute',
}

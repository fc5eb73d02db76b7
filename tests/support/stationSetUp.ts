/** What an administrator sends to set a station up, with everything a test does not care about filled in. */
import type { StationChange, StationDraft } from '../../shared/schemas/stationSetUp.ts'
import type { DeploymentDraftContent, DraftSensor } from '../../shared/schemas/stationSetUpDeployments.ts'
import { defaultEstimateSettings } from '../../shared/waves/window.ts'

export const settingsContent = {
  windowSeconds: 300,
  hopSeconds: 60,
  graceSeconds: 10,
  landSectors: [[330, 150]] as [number, number][],
  periodRange: [6, 20] as [number, number],
  estimate: defaultEstimateSettings,
}

const stationFields = (code: string): StationChange => ({
  code,
  shortName: `Short ${code}`,
  name: `Station ${code}`,
  latitude: 47.4865,
  longitude: -21.0222,
  datumName: 'chart datum',
  datumOffset: -1.2,
  datumSurveyedOn: '2026-05-04',
  staleAfterSeconds: 600,
  areaPolygon: null,
  notes: '',
  state: 'active',
  reason: 'New station',
})

export const stationDraft = (code: string, wanted: Partial<StationDraft> = {}): StationDraft => ({
  ...stationFields(code),
  settings: { sampleRate: 4, content: settingsContent },
  ...wanted,
})

export const stationChange = (code: string, wanted: Partial<StationChange> = {}): StationChange => ({
  ...stationFields(code),
  ...wanted,
})

export const draftSensor = (letter: string, east: number, north: number): DraftSensor => ({
  letter,
  serial: `${letter}-4101`,
  kind: 'surface',
  position: { by: 'grid', east, north },
  heightAboveBed: 0.5,
  positionSd: 0.05,
  clockSd: 0.002,
  scale: 1,
  offset: 0,
  pressureKind: 'gauge',
})

/** Five sensors over 30 m, which have nothing to resolve for waves of 6 s and longer. */
export const fiveSensors = (): DraftSensor[] => [
  draftSensor('A', 0, 0),
  draftSensor('B', 14, 3),
  draftSensor('C', 4, 15),
  draftSensor('D', -12, 6),
  draftSensor('E', -5, -13),
]

export const draftContent = (wanted: Partial<DeploymentDraftContent> = {}): DeploymentDraftContent => ({
  waterDepth: 9,
  levelOfBed: -9,
  surveyedOn: '2026-11-30',
  notes: '',
  sensors: fiveSensors(),
  ...wanted,
})

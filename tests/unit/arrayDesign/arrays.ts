/** Arrays and questions with everything a test does not care about filled in. */
import type { DesignedArray } from '../../../shared/arrayDesign/checkDesign.ts'
import { designQuestionOf } from '../../../shared/arrayDesign/designQuestion.ts'
import type { PlacedSensor } from '../../../shared/schemas/stationSetUpDeployments.ts'
import type { DesignQuestion } from '../../../shared/schemas/stationSetUpDesign.ts'
import { defaultEstimateSettings } from '../../../shared/waves/window.ts'

export const placed = (letter: string, east: number, north: number): PlacedSensor => ({
  letter,
  serial: `S-${letter}`,
  kind: 'pressure',
  position: { by: 'grid', east, north },
  east,
  north,
  heightAboveBed: 0.5,
  positionSd: 0.05,
  clockSd: 0.002,
  scale: 1,
  offset: 0,
  pressureKind: 'gauge',
})

export const draftOf = (places: [number, number][], waterDepth = 8): DesignedArray => ({
  sensors: places.map(([east, north], n) => placed(String.fromCharCode(65 + n), east, north)),
  levelOfBed: -waterDepth,
  earlier: null,
})

export function questionOf(wanted: Partial<DesignQuestion> = {}): DesignQuestion {
  const settings = { windowSeconds: 1200, hopSeconds: 60, graceSeconds: 10, landSectors: [], estimate: defaultEstimateSettings } // prettier-ignore
  return { ...designQuestionOf(settings, wanted.waterDepth ?? 8, 4), ...wanted }
}

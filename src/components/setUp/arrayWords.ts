/** Where an array stands, in words, and in what two drafts of it differ. Pure. */
import type { DeploymentDraftContent, DeploymentRecord, DraftSensor } from '../../../shared/schemas/stationSetUpDeployments.ts' // prettier-ignore
import type { Difference } from './stationForm.ts'
import { dayWords } from './stationWords.ts'
import { rowOf, surveyFormOf } from './surveyForm.ts'

/** `deployment 3, surveyed 2 Oct 2026, in force. Draft of deployment 4`; null: nothing is drafted. */
export function arrayWords(
  inForce: DeploymentRecord | null,
  draft: { number: number; corrects: boolean } | null,
): string {
  const surveyed = inForce?.surveyedOn ? `, surveyed ${dayWords(inForce.surveyedOn)}` : ''
  const now = inForce ? `deployment ${inForce.number}${surveyed}, in force` : 'no deployment in force'
  if (draft === null) return now
  return `${now}. ${draft.corrects ? 'Correction' : 'Draft'} of deployment ${draft.number}`
}

function sensorWords(sensor: DraftSensor | undefined): string {
  if (!sensor) return 'not there'
  const row = rowOf(sensor, '')
  const place = {
    grid: `${row.east} m east, ${row.north} m north`,
    geographic: `${row.latitude}, ${row.longitude}`,
    polar: `${row.range} m, ${row.bearing}° T from ${row.from || 'the station'}`,
  }[row.by]
  return `${place}; serial ${row.serial || 'none'}, ${row.kind}, ${row.heightAboveBed} m above the bed, ± ${row.positionSd} m, clock ± ${row.clockSd} s, × ${row.scale} + ${row.offset}`
}

/** Sensors are known by their letters. */
export function draftDifferences(mine: DeploymentDraftContent, theirs: DeploymentDraftContent): Difference[] {
  const [own, other] = [surveyFormOf(mine), surveyFormOf(theirs)]
  const plain: Difference[] = [
    { label: 'Still water depth, m', mine: own.waterDepth, theirs: other.waterDepth },
    { label: 'Level of the bed, m', mine: own.levelOfBed, theirs: other.levelOfBed },
    { label: 'Surveyed on', mine: own.surveyedOn || 'not known', theirs: other.surveyedOn || 'not known' },
    { label: 'Notes', mine: own.notes || 'none', theirs: other.notes || 'none' },
  ]
  const letters = [...new Set([...mine.sensors, ...theirs.sensors].map((sensor) => sensor.letter))]
  const of = ({ sensors }: DeploymentDraftContent, letter: string): string =>
    sensorWords(sensors.find((sensor) => sensor.letter === letter))
  const sensors = letters.map((letter) => ({ label: letter, mine: of(mine, letter), theirs: of(theirs, letter) }))
  return [...plain, ...sensors].filter((one) => one.mine !== one.theirs)
}

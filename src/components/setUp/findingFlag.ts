/** A finding's quality as the quality flag whose mark is drawn. */
import type { QualityFlag } from '../../../shared/schemas/estimate.ts'
import type { DesignFinding } from '../../../shared/schemas/stationSetUpDesign.ts'

export const findingFlag: Record<DesignFinding['quality'], QualityFlag> = { good: 1, suspect: 3, fail: 4 }

/** Of the findings that name the sensor (`moved:OL-3`) the worst; good where none does. */
export function sensorFlag(findings: readonly DesignFinding[], letter: string): QualityFlag {
  const flags = findings
    .filter((one) => one.check.split(':').slice(1).includes(letter))
    .map((one) => findingFlag[one.quality])
  return flags.includes(4) ? 4 : flags.includes(3) ? 3 : 1
}

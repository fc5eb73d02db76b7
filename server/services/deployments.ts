/** Versions of an array's geometry: a new survey never rewrites the past. */
import { compareDeployments } from '../../shared/arrayDesign/compareDeployments.ts'
import type { DeploymentComparison, DeploymentRecord } from '../../shared/schemas/stationSetUpDeployments.ts'
import type { Parts } from '../config/parts.ts'
import { stationOf } from './deployments/drafts.ts'
import { deploymentRecord, deploymentRecords } from './deployments/rows.ts'

export { addDraft, changeDraft, discardDraft, listDrafts, readDraft } from './deployments/drafts.ts'
export type { DraftEdit } from './deployments/drafts.ts'
export { checkDraft, putInForce } from './deployments/putInForce.ts'

export async function listDeploymentRecords(parts: Parts, stationId: number): Promise<DeploymentRecord[]> {
  await stationOf(stationId)
  return deploymentRecords(parts, stationId)
}

export async function compareVersions(
  parts: Parts,
  stationId: number,
  beforeId: number,
  afterId: number,
): Promise<DeploymentComparison> {
  const [before, after] = [
    await deploymentRecord(parts, stationId, beforeId),
    await deploymentRecord(parts, stationId, afterId),
  ]
  return compareDeployments(before, after)
}

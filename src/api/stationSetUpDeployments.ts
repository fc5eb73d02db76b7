import { z } from 'zod'
import {
  deploymentComparison,
  deploymentDraftView,
  deploymentRecord,
} from '../../shared/schemas/stationSetUpDeployments.ts'
import type {
  DeploymentComparison,
  deploymentDraftOrder,
  DeploymentDraftContent,
  DeploymentDraftView,
  DeploymentOrder,
  DeploymentRecord,
} from '../../shared/schemas/stationSetUpDeployments.ts'
import { request } from './request.ts'

export type DeploymentDraftOrder = z.infer<typeof deploymentDraftOrder>

const drafts = (stationId: number): string => `/api/stations/${stationId}/deploymentDrafts`

export const readDeployments = (stationId: number): Promise<DeploymentRecord[]> =>
  request('GET', `/api/stations/${stationId}/deployments/history`, z.array(deploymentRecord))

export const compareDeployments = (stationId: number, before: number, after: number): Promise<DeploymentComparison> =>
  request('GET', `/api/stations/${stationId}/deployments/${before}/comparison/${after}`, deploymentComparison)

export const readDrafts = (stationId: number): Promise<DeploymentDraftView[]> =>
  request('GET', drafts(stationId), z.array(deploymentDraftView))

export const beginDraft = (stationId: number, order: DeploymentDraftOrder): Promise<DeploymentDraftView> =>
  request('POST', drafts(stationId), deploymentDraftView, order)

export const changeDraft = (
  { stationId, id, version }: DeploymentDraftView,
  content: DeploymentDraftContent,
): Promise<DeploymentDraftView> => request('PUT', `${drafts(stationId)}/${id}`, deploymentDraftView, content, version)

export const discardDraft = async ({ stationId, id, version }: DeploymentDraftView): Promise<void> => {
  await request('DELETE', `${drafts(stationId)}/${id}`, z.unknown(), undefined, version)
}

export const putInForce = (
  { stationId, id, version }: DeploymentDraftView,
  order: DeploymentOrder,
): Promise<DeploymentRecord> =>
  request('POST', `${drafts(stationId)}/${id}/putInForce`, deploymentRecord, order, version)

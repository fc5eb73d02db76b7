/** Surveys of arrays: versions that are or were in force, and drafts that are worked on. */
import { defineStore } from 'pinia'
import { shallowReactive } from 'vue'
import type {
  DeploymentDraftContent,
  DeploymentDraftView,
  DeploymentOrder,
  DeploymentRecord,
} from '../../shared/schemas/stationSetUpDeployments.ts'
import * as api from '../api/stationSetUpDeployments.ts'
import type { DeploymentDraftOrder } from '../api/stationSetUpDeployments.ts'

export const useStationSetUpDeployments = defineStore('stationSetUpDeployments', () => {
  const versions = shallowReactive(new Map<number, DeploymentRecord[]>())
  const drafts = shallowReactive(new Map<number, DeploymentDraftView[]>())

  /** Newest first; corrections too. */
  const of = (stationId: number): DeploymentRecord[] => versions.get(stationId) ?? []
  const inForce = (stationId: number): DeploymentRecord | null =>
    of(stationId).find((one) => one.isInForce && one.replacesId === null) ?? null
  /** The draft of a new version (null), or of the correction of one. */
  const draftOf = (stationId: number, correctsId: number | null): DeploymentDraftView | null =>
    drafts.get(stationId)?.find((draft) => draft.correctsId === correctsId) ?? null

  function apply(draft: DeploymentDraftView): DeploymentDraftView {
    const others = (drafts.get(draft.stationId) ?? []).filter((one) => one.id !== draft.id)
    drafts.set(draft.stationId, [...others, draft])
    return draft
  }
  const forget = ({ stationId, id }: DeploymentDraftView): void =>
    void drafts.set(
      stationId,
      (drafts.get(stationId) ?? []).filter((one) => one.id !== id),
    )

  async function read(stationId: number): Promise<void> {
    const [found, open] = await Promise.all([api.readDeployments(stationId), api.readDrafts(stationId)])
    versions.set(stationId, found)
    drafts.set(stationId, open)
  }
  const begin = async (stationId: number, order: DeploymentDraftOrder): Promise<DeploymentDraftView> =>
    apply(await api.beginDraft(stationId, order))
  const save = async (draft: DeploymentDraftView, content: DeploymentDraftContent): Promise<DeploymentDraftView> =>
    apply(await api.changeDraft(draft, content))
  async function discard(draft: DeploymentDraftView): Promise<void> {
    await api.discardDraft(draft)
    forget(draft)
  }
  async function putInForce(draft: DeploymentDraftView, order: DeploymentOrder): Promise<void> {
    await api.putInForce(draft, order)
    await read(draft.stationId)
  }

  return { of, inForce, draftOf, apply, read, begin, save, discard, putInForce, compare: api.compareDeployments }
})

/** Files of readings: brought in, checked, stored, undone. Every answer passes through `apply`. */
import { defineStore } from 'pinia'
import { shallowReactive } from 'vue'
import type { ImportView, UploadLayout, UploadView } from '../../shared/schemas/stationSetUpUploads.ts'
import * as api from '../api/stationSetUpUploads.ts'
import type { UploadKind } from '../api/stationSetUpUploads.ts'

export type { UploadKind }

export const useStationSetUpUploads = defineStore('stationSetUpUploads', () => {
  const uploads = shallowReactive(new Map<number, UploadView[]>())
  const imports = shallowReactive(new Map<number, ImportView[]>())
  /** Still open, newest first. */
  const uploadsOf = (stationId: number, kind: UploadKind): UploadView[] =>
    (uploads.get(stationId) ?? []).filter((one) => one.kind === kind)
  /** Newest first. */
  const importsOf = (stationId: number): ImportView[] => imports.get(stationId) ?? []

  function apply(view: UploadView): UploadView {
    const others = (uploads.get(view.stationId) ?? []).filter((one) => one.id !== view.id)
    uploads.set(
      view.stationId,
      [view, ...others].sort((a, b) => b.id - a.id),
    )
    return view
  }
  async function read(stationId: number): Promise<void> {
    const [open, done] = await Promise.all([api.readUploads(stationId), api.readImports(stationId)])
    uploads.set(stationId, open)
    imports.set(stationId, done)
  }
  const refresh = async (id: number): Promise<UploadView> => apply(await api.readUpload(id))
  async function send(
    stationId: number,
    kind: UploadKind,
    file: File,
    onSent: (share: number) => void,
    signal: AbortSignal,
  ): Promise<UploadView> {
    return apply(await api.upload(stationId, kind, file, { onSent, signal }))
  }
  const check = async (id: number, layout: UploadLayout): Promise<UploadView> =>
    apply(await api.checkUpload(id, layout))
  const store = async (id: number, layout: UploadLayout): Promise<UploadView> =>
    apply(await api.storeUpload(id, layout))
  async function discard({ id, stationId }: UploadView): Promise<void> {
    await api.discardUpload(id)
    uploads.set(
      stationId,
      (uploads.get(stationId) ?? []).filter((one) => one.id !== id),
    )
  }
  async function undo({ id, stationId }: ImportView, reason: string): Promise<void> {
    const undone = await api.undoImport(id, reason)
    imports.set(
      stationId,
      importsOf(stationId).map((one) => (one.id === undone.id ? undone : one)),
    )
  }

  return { uploadsOf, importsOf, apply, read, refresh, send, check, store, discard, undo, cancel: api.cancelJob }
})

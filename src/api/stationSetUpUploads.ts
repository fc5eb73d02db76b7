import { z } from 'zod'
import { longJobView } from '../../shared/schemas/longJob.ts'
import type { LongJobView } from '../../shared/schemas/longJob.ts'
import { importView, uploadView } from '../../shared/schemas/stationSetUpUploads.ts'
import type { ImportView, UploadLayout, UploadView } from '../../shared/schemas/stationSetUpUploads.ts'
import { request } from './request.ts'
import { sendFile } from './sendFile.ts'
import type { FileSending } from './sendFile.ts'

export type UploadKind = UploadView['kind']

/** Streams the file as it is. */
export const upload = (
  stationId: number,
  kind: UploadKind,
  file: File,
  sending: Pick<FileSending, 'onSent' | 'signal'>,
): Promise<UploadView> => {
  const query = new URLSearchParams({ kind, fileName: file.name })
  return sendFile({ ...sending, path: `/api/stations/${stationId}/uploads?${query}`, file }, uploadView)
}

export const readUploads = (stationId: number): Promise<UploadView[]> =>
  request('GET', `/api/stations/${stationId}/uploads`, z.array(uploadView))

export const readUpload = (id: number): Promise<UploadView> => request('GET', `/api/uploads/${id}`, uploadView)

export const checkUpload = (id: number, layout: UploadLayout): Promise<UploadView> =>
  request('POST', `/api/uploads/${id}/check`, uploadView, { layout })

export const storeUpload = (id: number, layout: UploadLayout): Promise<UploadView> =>
  request('POST', `/api/uploads/${id}/store`, uploadView, { layout })

export const discardUpload = async (id: number): Promise<void> => {
  await request('DELETE', `/api/uploads/${id}`, z.unknown())
}

export const readImports = (stationId: number): Promise<ImportView[]> =>
  request('GET', `/api/stations/${stationId}/imports`, z.array(importView))

export const undoImport = (id: number, reason: string): Promise<ImportView> =>
  request('POST', `/api/imports/${id}/undo`, importView, { reason })

export const cancelJob = (id: number): Promise<LongJobView> => request('POST', `/api/jobs/${id}/cancel`, longJobView)

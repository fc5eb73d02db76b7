import { z } from 'zod'
import { withReason } from '../../shared/schemas/alert.ts'
import { importView, uploadKind, uploadOrder, uploadView } from '../../shared/schemas/stationSetUpUploads.ts'
import type { Parts } from '../config/parts.ts'
import { listImports, readImport, undoImport } from '../services/imports.ts'
import { discardUpload, listUploads, orderUpload, readUpload, receiveUpload } from '../services/uploads.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const stationInPath = z.object({ stationId: idInPath })
const uploadInPath = z.object({ uploadId: idInPath })
/** A large file over a slow line. */
const receivingDeadline = 30 * 60_000
/** A day of a station's minutes is taken out again within seconds, a year within minutes. */
const undoingDeadline = 5 * 60_000

const act = (parts: Parts, name: 'check' | 'store', summary: string): Route =>
  route({
    method: 'post',
    path: `/api/uploads/:uploadId/${name}`,
    action: 'imports.change',
    summary,
    params: uploadInPath,
    body: uploadOrder,
    answer: uploadView,
    status: 202,
    handle: ({ params, body, caller }) =>
      orderUpload(parts, { ...params, act: name, layout: body.layout, personId: caller.person.id }),
  })

export const uploadRoutes = (parts: Parts): Route[] => [
  route({
    method: 'post',
    path: '/api/stations/:stationId/uploads',
    action: 'imports.change',
    summary: 'Bring in a file (the body itself, text/csv); nothing of it is stored as readings yet',
    params: stationInPath,
    query: z.object({ kind: uploadKind, fileName: z.string().min(1).max(255) }),
    answer: uploadView,
    status: 201,
    deadlineMilliseconds: receivingDeadline,
    handle: ({ params, query, caller, request }) =>
      receiveUpload(parts, { ...params, ...query, source: request, personId: caller.person.id }),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/uploads',
    action: 'imports.read',
    summary: 'Files that were brought in and not thrown away, newest first',
    params: stationInPath,
    answer: z.array(uploadView),
    handle: ({ params }) => listUploads(parts, params.stationId),
  }),
  route({
    method: 'get',
    path: '/api/uploads/:uploadId',
    action: 'imports.read',
    summary: 'One of them, with what its check or its storing found',
    params: uploadInPath,
    answer: uploadView,
    handle: ({ params }) => readUpload(parts, params.uploadId),
  }),
  act(parts, 'check', 'Check a file as a long job: nothing is stored'),
  act(parts, 'store', 'Store a file as a long job: all of it or nothing'),
  route({
    method: 'delete',
    path: '/api/uploads/:uploadId',
    action: 'imports.change',
    summary: 'Throw a file away; what was stored of it stays until its import is undone',
    params: uploadInPath,
    handle: ({ params, caller }) => discardUpload(parts, params.uploadId, caller.person.id),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/imports',
    action: 'imports.read',
    summary: 'Files that were stored, or failed, newest first',
    params: stationInPath,
    answer: z.array(importView),
    handle: ({ params }) => listImports(params.stationId),
  }),
  route({
    method: 'post',
    path: '/api/imports/:importId/undo',
    action: 'imports.change',
    summary: 'Take the readings of a file out again; its windows are computed anew',
    params: z.object({ importId: idInPath }),
    body: withReason,
    answer: importView,
    deadlineMilliseconds: undoingDeadline,
    async handle({ params: { importId }, body, caller }) {
      await undoImport(parts, importId, caller.person.id, body.reason)
      return readImport(importId)
    },
  }),
]

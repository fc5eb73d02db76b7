import { z } from 'zod'
import type { Request, Response } from 'express'
import { withReason } from '../../shared/schemas/alert.ts'
import { stationFile } from '../../shared/schemas/stationFile.ts'
import { stationChange, stationDraft, stationRecord, stationSettingsOrder, stationSettingsRecord } from '../../shared/schemas/stationSetUp.ts' // prettier-ignore
import type { StationRecord } from '../../shared/schemas/stationSetUp.ts'
import type { Parts } from '../config/parts.ts'
import { changeStation, createStation, listSettingsVersions, listStationRecords, orderSettings, readStationRecord, restoreStation, retireStation } from '../services/stationSetUp.ts' // prettier-ignore
import type { StationEdit } from '../services/stationSetUp.ts'
import type { Caller } from '../services/sessions.ts'
import { readStationFile } from '../services/stations.ts'
import { versionIn } from './ifMatch.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const read = 'stationSetUp.read'
const change = 'stationSetUp.change'
const stationInPath = z.object({ stationId: idInPath })

function withTag(response: Response, record: StationRecord): StationRecord {
  response.set('ETag', `"${record.version}"`)
  return record
}

const editOf = (stationId: number, request: Request, { person }: Caller): StationEdit => ({
  stationId,
  version: versionIn(request),
  personId: person.id,
})

/** Retire and restore: with a reason, answering the station as it then stands. */
const service = (parts: Parts, name: 'retire' | 'restore', summary: string, work: typeof retireStation): Route =>
  route({
    method: 'post',
    path: `/api/stations/:stationId/${name}`,
    action: change,
    summary,
    params: stationInPath,
    body: withReason,
    answer: stationRecord,
    async handle({ params: { stationId }, body, caller, request, response }) {
      return withTag(response, await work(parts, editOf(stationId, request, caller), body.reason))
    },
  })

export const stationSetUpRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/stationRecords',
    action: read,
    summary: 'All stations as they are set up, retired ones too',
    answer: z.array(stationRecord),
    handle: () => listStationRecords(parts),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/record',
    action: read,
    summary: 'One station as it is set up',
    params: stationInPath,
    answer: stationRecord,
    handle: async ({ params, response }) => withTag(response, await readStationRecord(parts, params.stationId)),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/stationFile',
    action: read,
    summary: 'The station and its array in force as a file, for a simulator or for analysing a recording',
    params: stationInPath,
    answer: stationFile,
    handle: ({ params }) => readStationFile(parts, params.stationId),
  }),
  route({
    method: 'post',
    path: '/api/stations',
    action: change,
    summary: 'Make a station with its first settings',
    body: stationDraft,
    answer: stationRecord,
    status: 201,
    handle: async ({ body, caller, response }) => withTag(response, await createStation(parts, body, caller.person.id)),
  }),
  route({
    method: 'put',
    path: '/api/stations/:stationId',
    action: change,
    summary: 'Change a station; needs If-Match with its version',
    params: stationInPath,
    body: stationChange,
    answer: stationRecord,
    async handle({ params: { stationId }, body, caller, request, response }) {
      return withTag(response, await changeStation(parts, editOf(stationId, request, caller), body))
    },
  }),
  service(parts, 'retire', 'Take a station out of service; what it measured stays; needs If-Match', retireStation),
  service(parts, 'restore', 'Put a retired station back, in maintenance; needs If-Match', restoreStation),
  route({
    method: 'get',
    path: '/api/stations/:stationId/settings/history',
    action: read,
    summary: 'Versions of how a station is computed, with author and reason, newest first',
    params: stationInPath,
    answer: z.array(stationSettingsRecord),
    handle: ({ params }) => listSettingsVersions(parts, params.stationId),
  }),
  route({
    method: 'post',
    path: '/api/stations/:stationId/settings',
    action: change,
    summary: 'Put new settings in force from now or later; needs If-Match with the version of the station',
    params: stationInPath,
    body: stationSettingsOrder,
    answer: stationSettingsRecord,
    status: 201,
    handle: ({ params: { stationId }, body, caller, request }) =>
      orderSettings(parts, { ...editOf(stationId, request, caller), order: body }),
  }),
]

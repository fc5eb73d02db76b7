import { z } from 'zod'
import { auxiliaryBatch, auxiliaryKind, auxiliaryOutcome, auxiliaryReadingView, auxiliaryView } from '../../shared/schemas/stationSetUpAuxiliary.ts' // prettier-ignore
import type { Parts } from '../config/parts.ts'
import { auxiliaryBetween, listAuxiliary, takeAuxiliary } from '../services/auxiliary.ts'
import { Refused } from '../services/problems.ts'
import { holderOfKey } from '../services/stationKeys.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const stationInPath = z.object({ stationId: idInPath })
const time = z.iso.datetime().transform((text) => new Date(text))

/** The same for a key that is unknown and one of another station. */
const keyRefused = (): Refused =>
  new Refused({
    status: 401,
    code: 'stationKey.refused',
    title: 'The key is refused',
    detail: 'Send "Authorization: Bearer KEY" with a valid key of this station.',
  })

export const auxiliaryRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/stations/:stationId/auxiliary',
    action: 'auxiliary.read',
    summary: 'Level, tide, barometer and wind beside the array: newest value, quality, and what is lost without',
    params: stationInPath,
    answer: z.array(auxiliaryView),
    handle: ({ params }) => listAuxiliary(parts, params.stationId),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/auxiliary/:kind',
    action: 'auxiliary.read',
    summary: 'Values of one kind, at most 31 days',
    params: stationInPath.extend({ kind: auxiliaryKind }),
    query: z.object({ from: time, to: time }),
    answer: z.array(auxiliaryReadingView),
    handle: ({ params, query }) => auxiliaryBetween(params.stationId, params.kind, query),
  }),
  route({
    method: 'post',
    path: '/api/stations/:stationId/auxiliary',
    action: 'auxiliary.change',
    summary: 'Enter values beside the array: all of them or none',
    params: stationInPath,
    body: auxiliaryBatch,
    answer: auxiliaryOutcome,
    handle: ({ params, body, caller }) =>
      takeAuxiliary(parts, { ...params, ...body, source: 'entered', personId: caller.person.id }),
  }),
  route({
    method: 'post',
    path: '/api/stations/:stationId/auxiliary/push',
    action: 'auxiliaryFeed.change',
    summary: "Send values beside the array with a station's key instead of a session",
    params: stationInPath,
    body: auxiliaryBatch,
    answer: auxiliaryOutcome,
    async handle({ params, body, request }) {
      const [, key = ''] = /^Bearer (\S{1,200})$/.exec(request.get('authorization') ?? '') ?? []
      const holder = await holderOfKey(parts, key)
      if (holder?.stationId !== params.stationId) throw keyRefused()
      return takeAuxiliary(parts, { ...params, ...body, source: 'push', personId: null })
    },
  }),
]

import { z } from 'zod'
import { withReason } from '../../shared/schemas/alert.ts'
import { placeView } from '../../shared/schemas/place.ts'
import { localFitAdoption, localFitView } from '../../shared/schemas/placeLocalFit.ts'
import { observationDraft, observationList, observationView } from '../../shared/schemas/placeObservation.ts'
import type { Parts } from '../config/parts.ts'
import { presentPlace } from '../presenters/place.ts'
import { addObservation, adoptLocalFit, listLocalFits, listObservations, withdrawObservation } from '../services/observations.ts' // prettier-ignore
import { versionIn } from './ifMatch.ts'
import { idInPath } from './parameters.ts'
import { placeInPath } from './places.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

/** Thousands of observations, each with its outlook. */
const fitDeadline = 20_000

export const observationRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/places/:placeId/observations',
    action: 'places.read',
    summary: 'What people saw at a place, newest first, each beside what was figured',
    params: placeInPath,
    query: z.object({ before: idInPath.optional() }),
    answer: observationList,
    handle: ({ params, query }) => listObservations(parts, params.placeId, query.before ?? null),
  }),
  route({
    method: 'post',
    path: '/api/places/:placeId/observations',
    action: 'observations.change',
    summary: 'Log what was seen; partners at places of their team',
    params: placeInPath,
    body: observationDraft,
    answer: observationView,
    status: 201,
    handle: ({ params, body, caller }) =>
      addObservation(parts, { placeId: params.placeId, draft: body, author: caller.person }),
  }),
  route({
    method: 'post',
    path: '/api/observations/:observationId/withdraw',
    action: 'observations.change',
    summary: 'Take back an observation, with a reason; it is kept and left out of fits',
    params: z.object({ observationId: idInPath }),
    body: withReason,
    answer: observationView,
    handle: ({ params, body, caller }) =>
      withdrawObservation(parts, { observationId: params.observationId, reason: body.reason, author: caller.person }),
  }),
  route({
    method: 'get',
    path: '/api/places/:placeId/localFits',
    action: 'places.read',
    summary: 'Observations held against figures, with the coefficients they propose; refused below 100',
    params: placeInPath,
    answer: z.object({ fits: z.array(localFitView) }),
    deadlineMilliseconds: fitDeadline,
    handle: async ({ params }) => ({ fits: await listLocalFits(parts, params.placeId) }),
  }),
  route({
    method: 'post',
    path: '/api/places/:placeId/localFits',
    action: 'places.change',
    summary: 'Adopt what a fit proposes, or take it out, as a new version of the settings; needs If-Match',
    params: placeInPath,
    body: localFitAdoption,
    answer: placeView,
    deadlineMilliseconds: fitDeadline,
    async handle({ params: { placeId }, body, caller, request }) {
      await adoptLocalFit(parts, { placeId, version: versionIn(request), personId: caller.person.id }, body)
      return presentPlace(parts, placeId)
    },
  }),
]

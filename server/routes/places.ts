import { z } from 'zod'
import { withReason } from '../../shared/schemas/alert.ts'
import {
  placeChange,
  placeDraft,
  placeSettingsChange,
  placeSettingsVersion,
  placeView,
} from '../../shared/schemas/place.ts'
import { placeCautions, placeCautionsChange } from '../../shared/schemas/placeCautions.ts'
import { outlookView, placeSeriesView } from '../../shared/schemas/placeOutlook.ts'
import { placeQuantityKey } from '../../shared/schemas/placeQuantity.ts'
import type { Parts } from '../config/parts.ts'
import { presentOutlook, presentPlace, presentPlaces } from '../presenters/place.ts'
import {
  changePlace,
  changePlaceSettings,
  createPlace,
  listPlaceSettings,
  readPlaceSeries,
  restorePlace,
  retirePlace,
} from '../services/places.ts'
import type { PlaceOrder } from '../services/places.ts'
import { notFound } from '../services/problems.ts'
import { changeSetting, settingInForce } from '../services/settings.ts'
import { inTransaction } from '../services/transaction.ts'
import { versionIn } from './ifMatch.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Asked, Route } from './registry.ts'

export const placeInPath = z.object({ placeId: idInPath })
const wholeNumber = z
  .string()
  .regex(/^\d{1,9}$/)
  .transform(Number)

const orderIn = ({
  params,
  caller,
  request,
}: Pick<Asked<typeof placeInPath, undefined, undefined>, 'params' | 'caller' | 'request'>): PlaceOrder => ({
  placeId: params.placeId,
  version: versionIn(request),
  personId: caller.person.id,
})

export const placeRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/places',
    action: 'places.read',
    summary: 'Places in service, each with its newest outlook, notices and limits',
    answer: z.object({ places: z.array(placeView) }),
    handle: async () => ({ places: await presentPlaces(parts) }),
  }),
  route({
    method: 'get',
    path: '/api/places/:placeId',
    action: 'places.read',
    summary: 'One place with its newest outlook, notices and limits',
    params: placeInPath,
    answer: placeView,
    handle: ({ params }) => presentPlace(parts, params.placeId),
  }),
  route({
    method: 'get',
    path: '/api/places/:placeId/settings',
    action: 'places.read',
    summary: 'The versions of the settings of a place, newest first',
    params: placeInPath,
    answer: z.object({ versions: z.array(placeSettingsVersion) }),
    handle: async ({ params }) => ({ versions: await listPlaceSettings(parts, params.placeId) }),
  }),
  route({
    method: 'get',
    path: '/api/places/:placeId/series',
    action: 'places.read',
    summary: 'One quantity of a place over the last hours, with gaps and substitutes',
    params: placeInPath,
    query: z.object({
      quantity: placeQuantityKey,
      hours: wholeNumber.pipe(z.number().min(1).max(744)).default(12),
      stepSeconds: wholeNumber.pipe(z.number().min(60).max(86_400)).default(300),
    }),
    answer: placeSeriesView,
    handle: ({ params, query }) => readPlaceSeries(parts, params.placeId, query),
  }),
  route({
    method: 'get',
    path: '/api/places/:placeId/outlooks/:windowEndsAt',
    action: 'places.read',
    summary: 'The outlook of one window with everything behind it',
    params: placeInPath.extend({ windowEndsAt: z.iso.datetime() }),
    query: z.object({ revision: wholeNumber.optional() }),
    answer: outlookView,
    async handle({ params: { placeId, windowEndsAt }, query }) {
      const window = { windowEndsAt: new Date(windowEndsAt), revision: query.revision ?? null }
      const outlook = await presentOutlook(parts, placeId, window)
      if (!outlook) throw notFound('outlook', `${placeId}/${windowEndsAt}`)
      return outlook
    },
  }),
  route({
    method: 'post',
    path: '/api/places',
    action: 'places.change',
    summary: 'A new place with its first settings',
    body: placeDraft,
    answer: placeView,
    status: 201,
    handle: async ({ body, caller }) => presentPlace(parts, await createPlace(parts, body, caller.person.id)),
  }),
  route({
    method: 'put',
    path: '/api/places/:placeId',
    action: 'places.change',
    summary: 'Describe a place anew: names, team, position, lists; needs If-Match',
    params: placeInPath,
    body: placeChange,
    answer: placeView,
    async handle(asked) {
      await changePlace(parts, orderIn(asked), asked.body)
      return presentPlace(parts, asked.params.placeId)
    },
  }),
  route({
    method: 'post',
    path: '/api/places/:placeId/settings',
    action: 'places.change',
    summary: 'Put a new version of the settings in force, with a reason; needs If-Match',
    params: placeInPath,
    body: placeSettingsChange,
    answer: placeView,
    async handle(asked) {
      await changePlaceSettings(parts, orderIn(asked), asked.body)
      return presentPlace(parts, asked.params.placeId)
    },
  }),
  route({
    method: 'delete',
    path: '/api/places/:placeId',
    action: 'places.change',
    summary: 'Retire a place without limits, with a reason; it is kept with its record; needs If-Match',
    params: placeInPath,
    body: withReason,
    answer: placeView,
    async handle(asked) {
      await retirePlace(parts, orderIn(asked), asked.body.reason)
      return presentPlace(parts, asked.params.placeId)
    },
  }),
  route({
    method: 'post',
    path: '/api/places/:placeId/restore',
    action: 'places.change',
    summary: 'Put a retired place back in service, with a reason; needs If-Match',
    params: placeInPath,
    body: withReason,
    answer: placeView,
    async handle(asked) {
      await restorePlace(parts, orderIn(asked), asked.body.reason)
      return presentPlace(parts, asked.params.placeId)
    },
  }),
  route({
    method: 'get',
    path: '/api/placeCautions',
    action: 'places.read',
    summary: 'The cautions beside figures of places',
    answer: placeCautions,
    handle: () => settingInForce(parts, 'placeCautions'),
  }),
  route({
    method: 'put',
    path: '/api/placeCautions',
    action: 'places.change',
    summary: 'Put other cautions beside figures of places, with a reason; none may be left out',
    body: placeCautionsChange,
    answer: placeCautions,
    async handle({ body, caller }) {
      const by = { personId: caller.person.id, reason: body.reason }
      await inTransaction(parts.sequelize, (transaction) =>
        changeSetting(parts, 'placeCautions', body.cautions, by, transaction),
      )
      return settingInForce(parts, 'placeCautions')
    },
  }),
]

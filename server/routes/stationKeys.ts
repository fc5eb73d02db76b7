import { z } from 'zod'
import { issuedStationKey, stationKeyOrder, stationKeyView } from '../../shared/schemas/station.ts'
import { connectionAttempt, keyRotation } from '../../shared/schemas/stationSetUpLink.ts'
import type { Parts } from '../config/parts.ts'
import { allAttempts, attemptsOf } from '../services/connections.ts'
import { issueStationKey, listStationKeys, revokeStationKey, rotateStationKeys } from '../services/stationKeys.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const stationInPath = z.object({ stationId: idInPath })
const keyInPath = z.object({ stationId: idInPath, keyId: idInPath })

export const stationKeyRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/stations/:stationId/keys',
    action: 'stationKeys.read',
    summary: 'Keys of a station, without their secrets',
    params: stationInPath,
    answer: z.array(stationKeyView),
    handle: ({ params }) => listStationKeys(params.stationId),
  }),
  route({
    method: 'post',
    path: '/api/stations/:stationId/keys',
    action: 'stationKeys.change',
    summary: 'Issue a key; its secret is in this answer and nowhere else',
    params: stationInPath,
    body: stationKeyOrder,
    answer: issuedStationKey,
    status: 201,
    handle: ({ params, body, caller }) =>
      issueStationKey(parts, {
        stationId: params.stationId,
        validUntil: body.validUntil === null ? null : new Date(body.validUntil),
        personId: caller.person.id,
      }),
  }),
  route({
    method: 'post',
    path: '/api/stations/:stationId/keys/rotate',
    action: 'stationKeys.change',
    summary: 'Issue a key beside those that are valid now, which end after the overlap',
    params: stationInPath,
    body: keyRotation,
    answer: issuedStationKey,
    status: 201,
    handle: ({ params, body, caller }) => rotateStationKeys(parts, { ...params, ...body, personId: caller.person.id }),
  }),
  route({
    method: 'get',
    path: '/api/stations/:stationId/connections',
    action: 'stationKeys.read',
    summary: 'Who tried to connect as the station since the server started, newest first, and what is wrong',
    params: stationInPath,
    answer: z.array(connectionAttempt),
    handle: async ({ params }) => attemptsOf(params.stationId),
  }),
  route({
    method: 'get',
    path: '/api/connections',
    action: 'stationKeys.read',
    summary: 'Who tried to connect as any station, also with keys that nobody has',
    answer: z.array(connectionAttempt),
    handle: async () => allAttempts(),
  }),
  route({
    method: 'post',
    path: '/api/stations/:stationId/keys/:keyId/revoke',
    action: 'stationKeys.change',
    summary: 'Revoke a key; a connection that uses it is closed at once',
    params: keyInPath,
    answer: stationKeyView,
    handle: ({ params, caller }) => revokeStationKey(parts, { ...params, personId: caller.person.id }),
  }),
]

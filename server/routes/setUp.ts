import { setUpRequest } from '../../shared/schemas/session.ts'
import type { Parts } from '../config/parts.ts'
import { completeSetUp } from '../services/people/setUp.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

export const setUpRoutes = (parts: Parts): Route[] => [
  route({
    method: 'post',
    path: '/api/setup',
    action: 'setUp.complete',
    summary: 'Make the first administrator with the one-time set-up token',
    body: setUpRequest,
    deadlineMilliseconds: 20_000,
    handle: ({ body }) => completeSetUp(parts, body),
  }),
]

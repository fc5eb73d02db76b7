import { z } from 'zod'
import {
  appliedConfiguration,
  appliedConfigurations,
  comparison,
  configuration,
  configurationOrder,
} from '../../shared/schemas/configuration.ts'
import type { Parts } from '../config/parts.ts'
import {
  applyConfiguration,
  compareConfiguration,
  exportConfiguration,
  listApplied,
  rollBackConfiguration,
} from '../services/configuration.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const slow = 15_000

export const configurationRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/configuration/file',
    action: 'configuration.read',
    summary: 'The whole configuration as one text, in a stable order and without secrets',
    answer: z.string(),
    media: 'application/json',
    deadlineMilliseconds: slow,
    handle: async ({ response }) => {
      const day = parts.clock.now().toISOString().slice(0, 10)
      response.set('Content-Disposition', `attachment; filename="offing-configuration-${day}.json"`)
      return exportConfiguration(parts)
    },
  }),
  route({
    method: 'post',
    path: '/api/configuration/comparison',
    action: 'configuration.change',
    summary: 'What such a file would change here; changes nothing',
    body: configuration,
    answer: comparison,
    deadlineMilliseconds: slow,
    handle: ({ body }) => compareConfiguration(parts, body),
  }),
  route({
    method: 'get',
    path: '/api/configuration/applied',
    action: 'configuration.read',
    summary: 'Files that were put in force, newest first',
    answer: appliedConfigurations,
    handle: async () => ({ applied: await listApplied() }),
  }),
  route({
    method: 'post',
    path: '/api/configuration/applied',
    action: 'configuration.change',
    summary:
      'Puts settings, people and lists of a file in force, all or nothing, if nothing changed since it was compared',
    body: configurationOrder,
    answer: appliedConfiguration,
    status: 201,
    deadlineMilliseconds: slow,
    handle: ({ body, caller }) => applyConfiguration(parts, body, caller.person.id),
  }),
  route({
    method: 'post',
    path: '/api/configuration/applied/:runId/roll-back',
    action: 'configuration.change',
    summary: 'What a file changed becomes again what it was; what it added is disabled or goes out of use',
    params: z.object({ runId: idInPath }),
    body: z.strictObject({ reason: z.string().trim().min(3).max(500) }),
    answer: appliedConfiguration,
    deadlineMilliseconds: slow,
    handle: ({ params, body, caller }) => rollBackConfiguration(parts, params.runId, body.reason, caller.person.id),
  }),
]

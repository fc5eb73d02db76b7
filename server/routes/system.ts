import { systemView } from '../../shared/schemas/system.ts'
import type { Parts } from '../config/parts.ts'
import { readSystem } from '../services/system.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

export const systemRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/system',
    action: 'system.read',
    summary: 'Versions, sizes, how far jobs have come, waiting e-mails, disk, backups, the newest look over the audit',
    answer: systemView,
    deadlineMilliseconds: 15_000,
    handle: () => readSystem(parts),
  }),
]

import { installationView } from '../../shared/schemas/session.ts'
import type { Parts } from '../config/parts.ts'
import { presentInstallation } from '../services/installation.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

export const installationRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/installation',
    action: 'installation.read',
    summary: 'What anybody may know before signing in',
    answer: installationView,
    handle: () => presentInstallation(parts),
  }),
]

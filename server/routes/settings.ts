import { publicSettings as publicSettingsShape } from '../../shared/schemas/coast.ts'
import type { Parts } from '../config/parts.ts'
import { publicSettings } from '../services/settings.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

export const settingsRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/settings',
    action: 'settings.read',
    summary: "The port's name, lead station, cautions and plan of the coast",
    answer: publicSettingsShape,
    handle: () => publicSettings(parts),
  }),
]

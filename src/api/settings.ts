import { publicSettings } from '../../shared/schemas/coast.ts'
import type { PublicSettings } from '../../shared/schemas/coast.ts'
import { request } from './request.ts'

export const readSettings = (): Promise<PublicSettings> => request('GET', '/api/settings', publicSettings)

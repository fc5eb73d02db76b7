import { z } from 'zod'
import { longJobView } from '../../shared/schemas/longJob.ts'
import type { LongJobView } from '../../shared/schemas/longJob.ts'
import { request } from './request.ts'

export const readJobs = (): Promise<LongJobView[]> => request('GET', '/api/jobs', z.array(longJobView))

import { z } from 'zod'
import { longJobView } from '../../shared/schemas/longJob.ts'
import type { Parts } from '../config/parts.ts'
import { cancelJob, listJobs, readJob } from '../services/longJobs.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const jobInPath = z.object({ jobId: idInPath })

export const jobRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/jobs',
    action: 'jobs.read',
    summary: 'Long work under way, and what ended within the last day',
    answer: z.array(longJobView),
    handle: () => listJobs(parts),
  }),
  route({
    method: 'get',
    path: '/api/jobs/:jobId',
    action: 'jobs.read',
    summary: 'One long job',
    params: jobInPath,
    answer: longJobView,
    handle: ({ params }) => readJob(params.jobId),
  }),
  route({
    method: 'post',
    path: '/api/jobs/:jobId/cancel',
    action: 'jobs.cancel',
    summary: 'Cancel a long job; what it has done stays',
    params: jobInPath,
    answer: longJobView,
    handle: ({ params, caller }) => cancelJob(parts, params.jobId, caller.person.id),
  }),
]

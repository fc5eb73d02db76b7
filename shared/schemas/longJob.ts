import { z } from 'zod'

/** Work that takes long, with its progress: imports, the demonstration's past, recomputing. */
export const longJobView = z.object({
  id: z.number().int(),
  kind: z.string(),
  /** One sentence for people. */
  title: z.string(),
  status: z.enum(['queued', 'running', 'done', 'failed', 'cancelled']),
  /** 0 to 1. */
  progress: z.number(),
  detail: z.string().nullable(),
  startedAt: z.iso.datetime().nullable(),
  updatedAt: z.iso.datetime(),
})
export type LongJobView = z.infer<typeof longJobView>

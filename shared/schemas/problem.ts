/** RFC 9457 problem details: the one shape of every error the API gives. */
import { z } from 'zod'

export const problem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string().optional(),
  instance: z.string().optional(),
  /** Stable code for programs, such as `session.wrongPassword`. */
  code: z.string(),
  /** Faults by field, where the input was refused. */
  errors: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
  /** How the resource stands now, where somebody else changed it first. */
  current: z.unknown().optional(),
})
export type Problem = z.infer<typeof problem>

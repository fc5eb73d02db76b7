/** What the office has agreed about alerts and their e-mails. Times ISO 8601 UTC; the clock time is the port's. */
import { z } from 'zod'
import { personName } from './limit.ts'

/** Once a day an e-mail says that the program runs: its silence is news. */
export const dailyEmail = z.strictObject({
  /** `07:00`; null: no daily e-mail. */
  heartbeatAt: z
    .string()
    .regex(/^([01]\d|2[0-3]):[0-5]\d$/, 'must be a time such as 07:00')
    .nullable(),
  /** Null, or a list that has nobody: all operators and administrators. */
  heartbeatListId: z.number().int().positive().nullable(),
})
export type DailyEmail = z.infer<typeof dailyEmail>

export const watchRules = z.strictObject({
  /** Urgent limits need a second operator's consent or, alone, a written reason. */
  asksSecondPerson: z.boolean(),
  /** A limit lies on the shelf for one watch at most. */
  longestShelfHours: z.number().min(1).max(24),
})
export type WatchRules = z.infer<typeof watchRules>

const reason = z.string().trim().min(3).max(500)
/** `version`: for If-Match. The last three are null until somebody has set it. */
const inForce = {
  version: z.number().int(),
  since: z.iso.datetime().nullable(),
  by: personName.nullable(),
  reason: z.string().nullable(),
}

export const dailyEmailView = z.object({ ...inForce, content: dailyEmail })
export type DailyEmailView = z.infer<typeof dailyEmailView>
export const dailyEmailChange = z.strictObject({ content: dailyEmail, reason })
export const watchRulesView = z.object({ ...inForce, content: watchRules })
export type WatchRulesView = z.infer<typeof watchRulesView>
export const watchRulesChange = z.strictObject({ content: watchRules, reason })

import { z } from 'zod'
import { preferences } from './preferences.ts'

export const role = z.enum(['admin', 'operator', 'partner'])
export type Role = z.infer<typeof role>
export const team = z.enum(['harbour', 'beach safety'])
export type Team = z.infer<typeof team>

/** bcrypt reads no more than 72 bytes, so longer passwords are refused instead of cut. */
export const longestPasswordBytes = 72
export const shortestPassword = 12

export const signInRequest = z.strictObject({
  /** E-mail, or the name shown beside the account. */
  email: z.string().trim().min(1).max(254),
  password: z.string().min(1).max(256),
  /** Asked for with `session.codeNeeded` where the account has a second factor: six digits or a recovery code. */
  code: z.string().trim().max(40).optional(),
})
export type SignInRequest = z.infer<typeof signInRequest>

/** Who is signed in, and for how long. `readOnly` after the absolute limit, until the person signs in again. */
export const sessionView = z.object({
  person: z.object({
    id: z.number().int(),
    name: z.string(),
    email: z.string(),
    role,
    team: team.nullable(),
    timeZone: z.string(),
  }),
  preferences,
  /** A second factor has to be set up before anything else is shown. */
  mustEnrol: z.boolean(),
  readOnly: z.boolean(),
  absoluteUntil: z.iso.datetime(),
  serverTime: z.iso.datetime(),
})
export type SessionView = z.infer<typeof sessionView>

/** What anybody may know before signing in. */
export const installationView = z.object({
  kind: z.enum(['demonstration', 'real']),
  portName: z.string(),
  timeZone: z.string(),
  serverTime: z.iso.datetime(),
  /** No administrator yet: the set-up token is asked for. */
  needsSetUp: z.boolean(),
})
export type InstallationView = z.infer<typeof installationView>

export const setUpRequest = z.strictObject({
  token: z.string().min(20).max(200),
  name: z.string().trim().min(1).max(80),
  email: z.email().max(254),
  password: z.string().min(shortestPassword).max(256),
})
export type SetUpRequest = z.infer<typeof setUpRequest>

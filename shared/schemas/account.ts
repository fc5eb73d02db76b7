/** People as accounts: who may sign in, with which role, how, and where they are signed in now. Times ISO 8601 UTC. */
import { z } from 'zod'
import { role, shortestPassword, team } from './session.ts'

const time = z.iso.datetime()
/** A line break in a name could begin a header line of an e-mail. */
const oneLine = z
  .string()
  .trim()
  .regex(/^[^\p{Cc}]*$/u, 'must be one line')
const timeZone = z.string().min(1).max(60)

/**
 * `mailOnly`: no role, cannot sign in. `invited`: the link was sent and is still good. `linkEnded`: it ran out unused.
 * `active`: has chosen a passphrase. `disabled`: signs in no more and gets no e-mails.
 */
export const accountState = z.enum(['mailOnly', 'invited', 'linkEnded', 'active', 'disabled'])
export type AccountState = z.infer<typeof accountState>

export const accountView = z.object({
  id: z.number().int(),
  /** For If-Match. */
  version: z.number().int(),
  name: z.string(),
  email: z.string().nullable(),
  role: role.nullable(),
  team: team.nullable(),
  timeZone,
  state: accountState,
  disabledAt: time.nullable(),
  /** Until when an open link lets them choose a passphrase; null: there is none. */
  linkUntil: time.nullable(),
  hasPassphrase: z.boolean(),
  hasSecondFactor: z.boolean(),
  /** Sessions in force. */
  signedInOn: z.number().int(),
  lastSeenAt: time.nullable(),
})
export type AccountView = z.infer<typeof accountView>

export const invitation = z.strictObject({
  name: oneLine.min(1).max(80),
  email: z.email().max(254),
  role,
  team: team.nullable(),
  timeZone,
})
export type Invitation = z.infer<typeof invitation>

/** Needs If-Match with the person's version. Without a role they only get e-mails. */
export const accountChange = z.strictObject({
  name: oneLine.min(1).max(80),
  email: z.email().max(254).nullable(),
  role: role.nullable(),
  team: team.nullable(),
  timeZone,
})
export type AccountChange = z.infer<typeof accountChange>

export const ownSession = z.object({
  id: z.string(),
  kind: z.enum(['browser', 'wall']),
  /** `Computer, Linux`; what the browser says of itself, null where it says nothing. */
  device: z.string().nullable(),
  createdAt: time,
  lastSeenAt: time,
  /** The one that asks. */
  isThis: z.boolean(),
})
export type OwnSession = z.infer<typeof ownSession>

/** What stands behind the link of an invitation or a reset; asking changes nothing. */
export const passphraseLinkView = z.object({
  kind: z.enum(['invitation', 'reset']),
  name: z.string(),
  email: z.string(),
  portName: z.string(),
  isDemonstration: z.boolean(),
  expiresAt: time,
  /** `used`: by this person before; `ended`: too old, or a newer link was sent. */
  state: z.enum(['open', 'used', 'ended']),
})
export type PassphraseLinkView = z.infer<typeof passphraseLinkView>

export const passphraseChoice = z.strictObject({ password: z.string().min(1).max(256) })
/** Asks for a link by e-mail; the answer is the same for every address. */
export const resetRequest = z.strictObject({ email: z.string().trim().min(1).max(254) })

export const passphraseChange = z.strictObject({
  current: z.string().min(1).max(256),
  next: z.string().min(shortestPassword).max(256),
})
export type PassphraseChange = z.infer<typeof passphraseChange>

/** Where an urgent limit is set, changed or put aside, a second operator consents, or the author says why there is none. */
import { z } from 'zod'

/**
 * The second operator's own word, given at the same desk: name or e-mail and passphrase, asked as at signing in. It
 * signs nobody in and is kept nowhere.
 */
export const secondPerson = z.strictObject({
  email: z.string().trim().min(1).max(254),
  password: z.string().min(1).max(256),
})
export type SecondPerson = z.infer<typeof secondPerson>

/** Fields of a body; both null where no consent is asked. */
export const consentFields = {
  consent: secondPerson.nullable().default(null),
  /** Alone on watch: why. Kept, logged, and told to the administrators by e-mail. */
  aloneReason: z.string().trim().min(10).max(500).nullable().default(null),
}

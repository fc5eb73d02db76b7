/** The second factor: codes of six digits that change every thirty seconds (RFC 6238), and recovery codes for once. */
import { z } from 'zod'

/** Six digits, or a recovery code of sixteen letters and digits in fours; spaces and hyphens count for nothing. */
export const secondFactorCode = z
  .string()
  .trim()
  .max(40)
  .transform((code) => code.replace(/[\s-]/g, '').toLowerCase())
  .refine((code) => /^(\d{6}|[a-z2-7]{16})$/.test(code), 'is six digits, or a recovery code of sixteen characters')

export const secondFactorView = z.object({
  isEnrolled: z.boolean(),
  /** ISO 8601 UTC. */
  since: z.iso.datetime().nullable(),
  recoveryCodesLeft: z.number().int(),
  /** The office asks it of administrators. */
  isRequired: z.boolean(),
})
export type SecondFactorView = z.infer<typeof secondFactorView>

/** A new secret, not yet in force: it is once a code of it was given. */
export const secondFactorOffer = z.object({
  /** Base32, to be typed where no camera is at hand. */
  secret: z.string(),
  uri: z.string(),
  /** The uri as a QR code: so many modules a side, and the dark ones as an SVG path of unit squares. */
  size: z.number().int(),
  path: z.string(),
})
export type SecondFactorOffer = z.infer<typeof secondFactorOffer>

export const recoveryCodes = z.object({ codes: z.array(z.string()) })

export const passphraseProof = z.strictObject({ password: z.string().min(1).max(256) })
export const codeProof = z.strictObject({ code: secondFactorCode })

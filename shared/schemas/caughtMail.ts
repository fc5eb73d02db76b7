/** E-mails that the demonstration's own mail server kept instead of sending. */
import { z } from 'zod'

export const caughtMailLine = z.object({
  /** Names it in the path. */
  id: z.string(),
  receivedAt: z.iso.datetime(),
  from: z.string(),
  to: z.array(z.string()),
  subject: z.string(),
})
export const caughtMailList = z.object({ mails: z.array(caughtMailLine), total: z.number().int() })
export type CaughtMailList = z.infer<typeof caughtMailList>

/** `html` holds its pictures as data addresses and is foreign text: it is shown in a frame without scripts and origin. */
export const caughtMail = caughtMailLine.extend({
  messageId: z.string().nullable(),
  text: z.string(),
  html: z.string().nullable(),
})
export type CaughtMail = z.infer<typeof caughtMail>

/** People as recipients of e-mails: address, hours, deputy, absences. Times ISO 8601 UTC; hours in the port's zone. */
import { z } from 'zod'
import { personName, timeSpan } from './limit.ts'
import { role, team } from './session.ts'

const time = z.iso.datetime()
/** A line break in a name could begin a header line of an e-mail. */
const oneLine = z
  .string()
  .trim()
  .regex(/^[^\p{Cc}]*$/u, 'must be one line')

/** `accepted` and `refused` are the mail server's newest word; `unknown`: nothing was sent yet. Bounces are not read. */
export const mailHealth = z.enum(['unknown', 'accepted', 'refused'])

export const absence = z.strictObject({ startsAt: time, endsAt: time })
export const absenceView = absence.extend({ id: z.number().int() })

export const personView = z.object({
  id: z.number().int(),
  /** For If-Match. */
  version: z.number().int(),
  name: z.string(),
  email: z.string().nullable(),
  /** Null: only gets e-mails. */
  role: role.nullable(),
  team: team.nullable(),
  isDisabled: z.boolean(),
  /** When they read e-mails for the port; null: always. Outside them the deputy is told. */
  hours: timeSpan.shape.hours,
  deputy: personName.nullable(),
  mailHealth,
  /** Present and still to come. */
  absences: z.array(absenceView),
  lists: z.array(z.object({ id: z.number().int(), name: z.string(), isSafety: z.boolean() })),
})
export type PersonView = z.infer<typeof personView>

/** Somebody without a role: only gets e-mails. */
export const recipientDraft = z.strictObject({
  name: oneLine.min(1).max(80),
  email: z.email().max(254),
  team: team.nullable(),
})
export type RecipientDraft = z.infer<typeof recipientDraft>

const ownFields = {
  hours: timeSpan.shape.hours,
  deputyId: z.number().int().positive().nullable(),
  /** Replaces those that are not over. */
  absences: z.array(absence).max(20),
}
const inOrder = ({ absences }: { absences: { startsAt: string; endsAt: string }[] }): boolean =>
  absences.every(({ startsAt, endsAt }) => startsAt < endsAt)
const orderFault = { message: 'must end after they begin', path: ['absences'] }

/** What a person may change of themselves. */
export const profileChange = z.strictObject(ownFields).refine(inOrder, orderFault)
export type ProfileChange = z.infer<typeof profileChange>

/** Needs If-Match with the person's `version`. */
export const personChange = z
  .strictObject({
    ...ownFields,
    name: oneLine.min(1).max(80),
    email: z.email().max(254).nullable(),
    team: team.nullable(),
  })
  .refine(inOrder, orderFault)
export type PersonChange = z.infer<typeof personChange>

/** Who gets what by e-mail. */
import { z } from 'zod'
import { personName, priority, timeSpan } from './limit.ts'

export const listMember = z.strictObject({
  personId: z.number().int().positive(),
  /** Null: at all hours. In the port's zone. */
  hours: timeSpan.shape.hours,
  /** Only alerts of these priorities. */
  priorities: z.array(priority).min(1).max(4),
})
export type ListMember = z.infer<typeof listMember>

export const listContent = z.strictObject({
  name: z.string().trim().min(1).max(80),
  purpose: z.string().trim().max(300),
  /** Nobody leaves it by themselves: an operator takes them off. */
  isSafety: z.boolean(),
  members: z.array(listMember).max(200),
})
export type ListContent = z.infer<typeof listContent>

export const listView = z.object({
  id: z.number().int(),
  /** For If-Match. */
  version: z.number().int(),
  name: z.string(),
  purpose: z.string(),
  isSafety: z.boolean(),
  retiredAt: z.iso.datetime().nullable(),
  members: z.array(
    listMember.extend({
      person: personName.extend({ email: z.string().nullable(), mailHealth: z.string(), isAbsent: z.boolean() }),
      position: z.number().int(),
    }),
  ),
})
export type ListView = z.infer<typeof listView>

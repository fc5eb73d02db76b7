/**
 * Notices: beach flags, closures, advisories. The program lists reasons; a person decides, and who, when and why is kept. None lapses
 * silently: before it expires the watch and its lists are told, and afterwards it stands as expired, not withdrawn.
 *
 * GET  /api/places/:placeId/notices?days=30   places.read     -> { notices: noticeView[] } newest first, with past ones
 * POST /api/places/:placeId/notices           notices.change  noticeDraft -> 201 noticeView
 * PUT  /api/notices/:noticeId                 notices.change  noticeExtension, If-Match -> noticeView
 * POST /api/notices/:noticeId/withdraw        notices.change  { reason }, If-Match -> noticeView
 * GET  /api/beachFlags                        places.read     -> flagSet
 * PUT  /api/beachFlags                        places.change   flagSet & { reason } -> flagSet
 * Partners only at places of their team (403 `notice.notYourTeam`).
 */
import { z } from 'zod'
import { personName } from './limit.ts'

const time = z.iso.datetime()
const reason = z.string().trim().min(3).max(500)
const area = z.string().trim().min(3).max(200)

export const noticeKind = z.enum(['flag', 'closure', 'advisory'])
export type NoticeKind = z.infer<typeof noticeKind>

const flagColour = z.enum(['red', 'yellow', 'green', 'purple', 'white', 'black', 'orange', 'blue'])
export const beachFlag = z.strictObject({
  /** Stable name, such as `doubleRed`. */
  key: z.string().regex(/^[a-z][A-Za-z0-9]{1,30}$/),
  name: z.string().trim().min(1).max(40),
  /** How it is drawn: one colour plain, two halved, four quartered. */
  colours: z.array(flagColour).min(1).max(4),
  /** How many such flags fly together. */
  count: z.number().int().min(1).max(2),
  /** The local lifeguard authority's words. */
  meaning: z.string().trim().min(3).max(200),
})
export type BeachFlag = z.infer<typeof beachFlag>
export const flagSet = z.strictObject({
  /** Where the set comes from; said beside it. */
  source: z.string().trim().min(3).max(200),
  flags: z
    .array(beachFlag)
    .min(1)
    .max(12)
    .refine((flags) => new Set(flags.map(({ key }) => key)).size === flags.length, {
      message: 'must have each key once',
    }),
})
export type FlagSet = z.infer<typeof flagSet>
export const flagSetChange = z.strictObject({ flagSet, reason })

const span = {
  /** Null: at once. */
  startsAt: time.nullable(),
  reason,
}
export const noticeDraft = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('flag'),
    flag: beachFlag.shape.key,
    ...span,
    /** Null: until another is set or it is withdrawn. */
    expiresAt: time.nullable(),
  }),
  z.strictObject({ kind: z.literal('closure'), area, ...span, expiresAt: time }),
  z.strictObject({
    kind: z.literal('advisory'),
    area,
    text: z.string().trim().min(3).max(500),
    ...span,
    expiresAt: time,
  }),
])
export type NoticeDraft = z.infer<typeof noticeDraft>

export const noticeExtension = z.strictObject({ expiresAt: time, reason })
export type NoticeExtension = z.infer<typeof noticeExtension>

/** What is stored of its kind. The flag is kept whole, so that a later set does not change what flew. */
export const noticeContent = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('flag'), flag: beachFlag }),
  z.strictObject({ kind: z.literal('closure'), area }),
  z.strictObject({ kind: z.literal('advisory'), area, text: z.string() }),
])
export type NoticeContent = z.infer<typeof noticeContent>

export const noticeView = z.object({
  id: z.number().int(),
  /** For If-Match. */
  version: z.number().int(),
  placeId: z.number().int(),
  kind: noticeKind,
  content: noticeContent,
  /** As of now: `expired` means expired and not withdrawn, and stays in sight until somebody withdraws or extends it. */
  state: z.enum(['planned', 'inForce', 'expired', 'withdrawn', 'replaced']),
  startsAt: time,
  expiresAt: time.nullable(),
  /** Somebody is told from then on that it is about to expire. */
  warnsAt: time.nullable(),
  reason: z.string(),
  by: personName.nullable(),
  createdAt: time,
  withdrawnAt: time.nullable(),
  withdrawnBy: personName.nullable(),
  withdrawReason: z.string().nullable(),
  /** Oldest first: who extended it, when, to when and why. */
  extensions: z.array(z.object({ at: time, by: personName.nullable(), expiresAt: time, reason: z.string() })),
})
export type NoticeView = z.infer<typeof noticeView>

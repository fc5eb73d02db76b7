/**
 * Bulletins: what the sea was measured to do, in words, for many. A draft is edited; an issued one is frozen with its figures and is never
 * altered: it is replaced by the next of its chain, or cancelled. SI units; directions toward in degrees true; times ISO 8601 UTC.
 *
 * GET    /api/bulletins?before=            bulletins.read    -> { drafts: bulletinView[], bulletins: bulletinView[], next } newest first
 * GET    /api/bulletins/:bulletinId         bulletins.read    -> bulletinView
 * GET    /api/bulletinFigures               bulletins.read    -> { figures: bulletinFigure[] } as they are now
 * POST   /api/bulletins                     bulletins.change  bulletinDraft -> 201 bulletinView, figures frozen
 * PUT    /api/bulletins/:bulletinId         bulletins.change  bulletinEdit, If-Match -> bulletinView (drafts alone)
 * DELETE /api/bulletins/:bulletinId         bulletins.change  If-Match -> 204 (drafts alone)
 * POST   /api/bulletins/:bulletinId/issue   bulletins.change  bulletinIssue, If-Match -> bulletinView
 * POST   /api/bulletins/:bulletinId/cancel  bulletins.change  { reason }, If-Match -> bulletinView
 * POST   /api/bulletins/:bulletinId/proof   bulletins.change  -> 204, the e-mail to oneself
 * GET    /api/publicBulletins               publicBulletins.read (anybody, while the office has switched it on; else 404)
 *                                           -> { portName, bulletins: publicBulletin[] }
 * Live: room `bulletins`, kind `bulletin`, body bulletinView; a draft thrown away: kind `bulletinGone`, body { id }.
 */
import { z } from 'zod'
import { consentFields } from './consent.ts'
import { qualityFlag } from './estimate.ts'
import { personName, priority } from './limit.ts'
import { placeQuantityKey } from './placeQuantity.ts'

const time = z.iso.datetime()

/** Of the message markers of IMO Res. A.918(22) those that a shore desk may use without being a traffic service. */
export const bulletinMarker = z.enum(['information', 'warning'])
export type BulletinMarker = z.infer<typeof bulletinMarker>

const measured = {
  /** Of the estimate or outlook that the figure was taken from. */
  windowEndsAt: time,
  windowSeconds: z.number().int(),
  revision: z.number().int(),
  qualityFlag,
}

/** The leading system of a station, and all systems together. */
export const stationFigure = z.object({
  kind: z.literal('station'),
  stationId: z.number().int(),
  name: z.string(),
  ...measured,
  system: z.object({
    /** `Swell`, `Wind sea`. */
    name: z.string(),
    toward: z.number(),
    towardSd: z.number(),
    speed: z.number(),
    speedSd: z.number(),
    height: z.number(),
    heightSd: z.number().nullable(),
    period: z.number(),
  }),
  totalHeight: z.number().nullable(),
  totalHeightSd: z.number().nullable(),
  /** Of its array, for the drawing: metres true east and north, land between two bearings. Bulletins of earlier versions have none. */
  plan: z
    .object({
      sensors: z.array(z.object({ name: z.string(), east: z.number(), north: z.number() })),
      landSectors: z.array(z.tuple([z.number(), z.number()])),
    })
    .optional(),
})
export type StationFigure = z.infer<typeof stationFigure>

/** The lead quantity of a place. */
export const placeFigure = z.object({
  kind: z.literal('place'),
  placeId: z.number().int(),
  name: z.string(),
  ...measured,
  quantity: placeQuantityKey,
  value: z.number(),
  sd: z.number().nullable(),
  likely: z.object({ from: z.number(), to: z.number() }).nullable(),
  /** `inbound 038° T, from the port quarter, setting to starboard`; null where the figure has none. */
  words: z.string().nullable(),
  /** `from Fairway`, where the place's own station could not give it. */
  substitute: z.string().nullable(),
  /** Of the worst alert open on it when it was frozen. */
  priority: priority.nullable(),
})
export type PlaceFigure = z.infer<typeof placeFigure>

/** What cannot be included, and why: `stale 22 min, last good 14:10 UTC`. It is said in the bulletin, never left out. */
export const missingFigure = z.object({
  kind: z.literal('missing'),
  subject: z.enum(['station', 'place']),
  subjectId: z.number().int(),
  name: z.string(),
  reason: z.string(),
})
export type MissingFigure = z.infer<typeof missingFigure>

export const bulletinFigure = z.discriminatedUnion('kind', [stationFigure, placeFigure, missingFigure])
export type BulletinFigure = z.infer<typeof bulletinFigure>

const text = (most: number) => z.string().trim().max(most)

export const bulletinDraft = z.strictObject({
  marker: bulletinMarker,
  /** `Entrance and beaches`. */
  audience: text(80),
  headline: text(120),
  validFrom: time.nullable(),
  validUntil: time.nullable(),
  /** When the next one is due at the latest; null: none is promised. */
  nextIssueAt: time.nullable(),
  /** What it means, in the officer's words. */
  meaning: text(2000),
  listIds: z.array(z.number().int().positive()).max(50),
  /** `station:3`, `place:1`: what goes in, in this order. */
  chosen: z.array(z.string().regex(/^(station|place):[1-9]\d{0,8}$/)).max(40),
  /** The issued one that this replaces; null begins a chain. */
  replacesId: z.number().int().positive().nullable(),
  /** Marked everywhere as an exercise: no sea has done this. */
  isExercise: z.boolean().default(false),
})
export type BulletinDraft = z.infer<typeof bulletinDraft>

/** `freezeAgain`: takes the figures as they are now. */
export const bulletinEdit = z.strictObject({ draft: bulletinDraft, freezeAgain: z.boolean() })

export const bulletinIssue = z.strictObject({ ...consentFields })

export const bulletinStatus = z.enum(['draft', 'issued', 'replaced', 'cancelled'])

/** What stands in the bulletin, frozen when it was issued; a draft's is as of `frozenAt`. */
export const bulletinContent = z.object({
  marker: bulletinMarker,
  /** `2026-316`: year and running number of the issues; null for a draft. */
  number: z.string().nullable(),
  portName: z.string(),
  timeZone: z.string(),
  audience: z.string(),
  headline: z.string(),
  meaning: z.string(),
  issuedAt: time.nullable(),
  validFrom: time.nullable(),
  validUntil: time.nullable(),
  nextIssueAt: time.nullable(),
  figures: z.array(bulletinFigure),
  cautions: z.array(z.string()),
  /** Number of the bulletin that this one replaces. */
  replaces: z.string().nullable(),
  /** Of a cancellation: why. */
  cancelled: z.object({ at: time, reason: z.string() }).nullable(),
  isExercise: z.boolean(),
  isDemonstration: z.boolean(),
})
export type BulletinContent = z.infer<typeof bulletinContent>

/** Without any person's name. */
export const publicBulletin = bulletinContent.extend({ id: z.number().int(), status: bulletinStatus })
export type PublicBulletin = z.infer<typeof publicBulletin>

export const bulletinView = publicBulletin.extend({
  version: z.number().int(),
  chainId: z.number().int(),
  draft: bulletinDraft.nullable(),
  frozenAt: time.nullable(),
  /** Everything that a draft can choose of, as it was frozen; empty for an issue. */
  frozen: z.array(bulletinFigure),
  /** The office asks for a second operator, or for a written reason of who is alone, before it goes out. */
  asksSecondPerson: z.boolean(),
  author: personName,
  /** Who looked at it before it went out; null: nobody was asked, or the author was alone. */
  consentBy: personName.nullable(),
  aloneReason: z.string().nullable(),
  /** Lists and people that it goes, or went, to. */
  reach: z.object({ lists: z.array(z.object({ id: z.number().int(), name: z.string() })), people: z.number().int() }),
  /** Of its e-mails: accepted by the mail server, not out, receipts are not asked. */
  deliveries: z.object({ accepted: z.number().int(), notOut: z.number().int() }),
})
export type BulletinView = z.infer<typeof bulletinView>

/**
 * Places: entrance, breakwater, berths, beaches. Live rooms `places` and `place:ID`, event kind `place`, body placeView: whole, with
 * each new outlook, notice, limit's state and change.
 *
 * GET    /api/places                       places.read    -> { places: placeView[] } by position, without retired ones
 * GET    /api/places/:placeId              places.read    -> placeView
 * GET    /api/places/:placeId/settings     places.read    -> { versions: placeSettingsVersion[] } newest first
 * POST   /api/places                       places.change  placeDraft -> 201 placeView
 * PUT    /api/places/:placeId              places.change  placeChange, If-Match -> placeView
 * POST   /api/places/:placeId/settings     places.change  placeSettingsChange, If-Match -> placeView
 * DELETE /api/places/:placeId              places.change  { reason }, If-Match -> placeView (retired; kept with its record)
 * POST   /api/places/:placeId/restore      places.change  { reason }, If-Match -> placeView
 */
import { z } from 'zod'
import { alertState, notJudgedReason, personName, priority } from './limit.ts'
import { noticeView } from './placeNotice.ts'
import { outlookView } from './placeOutlook.ts'
import { placeKind, placeQuantityKey } from './placeQuantity.ts'
import { placeSettingsContent } from './placeSettings.ts'
import { team } from './session.ts'

const time = z.iso.datetime()
const reason = z.string().trim().min(3).max(500)

const described = {
  code: z
    .string()
    .trim()
    .regex(/^[A-Z0-9]{2,4}$/, 'must be 2 to 4 capitals or digits'),
  /** On the plan and in the strip. */
  shortName: z.string().trim().min(1).max(14),
  name: z.string().trim().min(1).max(40),
  /** Whose partners set its flags and closures; null: nobody's. */
  team: team.nullable(),
  latitude: z.number().min(-90).max(90),
  longitude: z.number().min(-180).max(180),
  /** GeoJSON ring of the area that closures speak of, longitude latitude; null: none drawn. */
  areaPolygon: z
    .array(z.tuple([z.number(), z.number()]))
    .min(4)
    .max(200)
    .nullable(),
  /** Order in lists and on Watch, from 1. */
  position: z.number().int().min(1).max(999),
  /** Who gets an e-mail about its flags, closures and advisories. */
  noticeListIds: z.array(z.number().int().positive()).max(20),
}

/** The kind never changes: another kind is another place. */
export const placeDraft = z.strictObject({ ...described, settings: placeSettingsContent, reason })
export type PlaceDraft = z.infer<typeof placeDraft>
export const placeChange = z.strictObject({ ...described, reason })
export type PlaceChange = z.infer<typeof placeChange>

/** `validFrom` null: from now on. Past moments are refused: stored outlooks keep the version they were made with. */
export const placeSettingsChange = z.strictObject({ content: placeSettingsContent, validFrom: time.nullable(), reason })
export type PlaceSettingsChange = z.infer<typeof placeSettingsChange>

export const placeSettingsVersion = z.object({
  id: z.number().int(),
  validFrom: time,
  content: placeSettingsContent,
  author: personName.nullable(),
  reason: z.string(),
})
export type PlaceSettingsVersion = z.infer<typeof placeSettingsVersion>

/** A limit at the place, as everyone may see it. */
export const placeLimit = z.object({
  limitId: z.number().int(),
  quantity: placeQuantityKey,
  title: z.string(),
  words: z.string(),
  priority,
  /** SI; null for a comparison without them. */
  raise: z.number().nullable(),
  clear: z.number().nullable(),
  onDelaySeconds: z.number().int(),
  offDelaySeconds: z.number().int(),
  state: alertState,
  isActive: z.boolean(),
  notJudged: notJudgedReason.nullable(),
  openAlertId: z.number().int().nullable(),
  raisedAt: time.nullable(),
  acknowledgedAt: time.nullable(),
  shelvedUntil: time.nullable(),
})
export type PlaceLimit = z.infer<typeof placeLimit>

export const placeView = z.object({
  id: z.number().int(),
  /** For If-Match; of the place and its settings together. */
  version: z.number().int(),
  kind: placeKind,
  ...described,
  settings: placeSettingsVersion,
  /** Names of the stations that the settings speak of, by id. */
  stations: z.array(z.object({ id: z.number().int(), code: z.string(), name: z.string() })),
  /** Newest, stale or not: the reader judges by `windowEndsAt` and `staleAfterSeconds` (`shared/places/livePlace`). */
  outlook: outlookView.nullable(),
  /** Newest outlook that had the lead quantity's figure, in short. */
  lastGood: z
    .object({ windowEndsAt: time, value: z.number(), sd: z.number().nullable(), stationName: z.string() })
    .nullable(),
  /** In force, to come, or expired and not withdrawn. */
  notices: z.array(noticeView),
  limits: z.array(placeLimit),
  retiredAt: time.nullable(),
})
export type PlaceView = z.infer<typeof placeView>

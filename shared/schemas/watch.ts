/**
 * Watches and hand-overs. One person is on watch, or nobody. Who hands over writes a note to each open item, and both sign: the relief by
 * passphrase at the same desk. When the relief must act at once they take over, and the notes are owed until written. Times ISO 8601 UTC.
 *
 * GET  /api/watches/now          watches.read    -> watchNow
 * GET  /api/watches?before=      watches.read    -> { watches: watchView[], next } newest first
 * POST /api/watches              watches.change  watchStart -> 201 watchNow: nobody is on watch, and one begins
 * GET  /api/handOvers/sheet      watches.read    -> handOverSheet as it would be now, with the notes written so far
 * PUT  /api/handOvers/notes      watches.change  handOverNotes -> handOverSheet; by who is on watch
 * POST /api/handOvers            watches.change  handOverSigning -> 201 watchNow: both sign; every item has its note
 * POST /api/handOvers/takeOver   watches.change  takeOver -> 201 watchNow: the relief, from their own session, notes owed
 * POST /api/handOvers/:handOverId/owed  watches.change  owedNotes -> watchNow; by who owes them
 * POST /api/watches/end          watches.change  { reason } -> watchNow: the watch ends and nobody follows; logged
 * Live: room `onWatch`, kind `watch`, body watchNow: who is on watch shows on every page.
 */
import { z } from 'zod'
import { missingFigure, stationFigure } from './bulletin.ts'
import { secondPerson } from './consent.ts'
import { personName } from './limit.ts'
import { logMark } from './watchLog.ts'

const time = z.iso.datetime()
const clock = z.string().regex(/^([01]\d|2[0-3]):[0-5]\d$/, 'must be a time such as 18:00')
const noteText = z.string().trim().max(1000)

/** A watch of the office's rota, by the port's clock; none: watches are free. */
export const rotaWatch = z.strictObject({ name: z.string().trim().min(1).max(20), from: clock, to: clock })
export const rota = z.array(rotaWatch).max(12)
export type RotaWatch = z.infer<typeof rotaWatch>

export const watchStart = z.strictObject({ name: z.string().trim().max(20).default('') })

/** An item that the next officer must know of. `key` stays the same while it is open: `alert:12`, `station:3`. */
export const carriedItem = z.object({
  key: z.string(),
  kind: z.enum(['alert', 'shelved', 'outOfService', 'station', 'notice', 'messages', 'owed']),
  /** `Cross-sea, Marrowick Entrance`. */
  title: z.string(),
  /** `active, not acknowledged`. */
  state: z.string(),
  mark: logMark.nullable(),
  alertId: z.number().int().nullable(),
  note: z.string(),
})
export type CarriedItem = z.infer<typeof carriedItem>

export const handOverSheet = z.object({
  /** Of who is on watch; null: nobody is. */
  watchId: z.number().int().nullable(),
  /** Filled in at signing. */
  sea: z.discriminatedUnion('kind', [stationFigure, missingFigure]).nullable(),
  carried: z.array(carriedItem),
  /** Since the watch began, from the log: limits, settings, arrays, places. Newest first. */
  changes: z.array(z.object({ at: time, text: z.string() })),
  /** Moments to come: ends of shelves and notices, tide, the next bulletin. */
  due: z.array(z.object({ at: time, text: z.string() })),
  expected: z.string(),
  /** The watch that comes next by the rota; null without a rota. */
  next: z.object({ name: z.string(), startsAt: time }).nullable(),
})
export type HandOverSheet = z.infer<typeof handOverSheet>

export const handOverNotes = z.strictObject({
  notes: z.record(z.string().max(40), noteText),
  expected: z.string().trim().max(2000),
})

/** `relief`: name or e-mail and passphrase of who takes over. `sound`: as the screen says it. */
export const handOverSigning = z.strictObject({
  relief: secondPerson,
  name: z.string().trim().max(20).default(''),
  sound: z.enum(['on', 'off', 'blocked', 'not known']).default('not known'),
})
export const takeOver = z.strictObject({
  reason: z.string().trim().min(3, 'say why it could not wait').max(500),
  name: z.string().trim().max(20).default(''),
})
export const owedNotes = z.strictObject({ notes: z.record(z.string().max(40), noteText) })

export const watchView = z.object({
  id: z.number().int(),
  person: personName,
  name: z.string(),
  startedAt: time,
  endedAt: time.nullable(),
})
export type WatchView = z.infer<typeof watchView>

export const handOverView = z.object({
  id: z.number().int(),
  from: watchView,
  to: watchView,
  sheet: handOverSheet,
  /** Null while notes are owed. */
  signedFromAt: time.nullable(),
  signedToAt: time,
  /** Taken over at once: why. */
  reason: z.string().nullable(),
  /** Items whose note is owed. */
  owed: z.array(carriedItem),
})
export type HandOverView = z.infer<typeof handOverView>

export const watchNow = z.object({
  watch: watchView.nullable(),
  /** Notes owed by anybody, oldest first. */
  owed: z.array(handOverView),
  /** That began this watch. */
  handOver: handOverView.nullable(),
  rota,
})
export type WatchNow = z.infer<typeof watchNow>

/**
 * What may be shown of a place at a given server time. Old figures leave the picture by the clock alone, as those of stations do: nobody
 * has to tell the page that they are old.
 */
import type { PlaceView } from '../schemas/place.ts'
import type { OutlookView } from '../schemas/placeOutlook.ts'

type ShownFigure = OutlookView['figures'][number]

export type LivePlace =
  /** No outlook was ever made. */
  | { kind: 'empty' }
  /** None of its stations has sent for longer than its limit: no figure. */
  | { kind: 'stale'; ageSeconds: number }
  /** There is an outlook, but not its lead figure; `reason` says why. Other figures may be there. */
  | { kind: 'without'; reason: string; outlook: OutlookView }
  | { kind: 'live'; lead: ShownFigure; outlook: OutlookView; ageSeconds: number }

type Seen = Pick<PlaceView, 'outlook' | 'settings'>

/** Seconds from the end of the window to `nowMs`. */
export const outlookAge = ({ windowEndsAt }: Pick<OutlookView, 'windowEndsAt'>, nowMs: number): number =>
  (nowMs - Date.parse(windowEndsAt)) / 1000

/** `nowMs`: server time, ms since 1970. */
export function livePlace({ outlook, settings }: Seen, nowMs: number): LivePlace {
  if (!outlook) return { kind: 'empty' }
  const ageSeconds = outlookAge(outlook, nowMs)
  if (ageSeconds > outlook.staleAfterSeconds) return { kind: 'stale', ageSeconds }
  const lead = outlook.figures.find(({ quantity }) => quantity === settings.content.leadQuantity)
  if (!lead || lead.figure.value === null) {
    return { kind: 'without', reason: outlook.reason ?? lead?.figure.reason ?? 'it cannot be determined', outlook }
  }
  return { kind: 'live', lead, outlook, ageSeconds }
}

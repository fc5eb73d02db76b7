/** Names of what is told of places: figures of outlooks, limits and series have them. */
import { z } from 'zod'

export const placeKind = z.enum(['entrance', 'breakwater', 'berth', 'beach'])
export type PlaceKind = z.infer<typeof placeKind>

/** SI: heights and levels m, current m/s, overtopping m³/s per m of crest, largest volume m³ per m. */
export const placeQuantityKey = z.enum([
  /** H_m0 of all systems, carried to the place. At entrances and breakwaters. */
  'placeHeight',
  'crossSea',
  'alongSea',
  'overtopping',
  'largestVolume',
  /** Height of the surge band, waves of 25 to 250 s. */
  'longSwell',
  'breakerHeight',
  'runUp',
  'setUp',
  'longshoreCurrent',
])
export type PlaceQuantityKey = z.infer<typeof placeQuantityKey>

/** What each kind of place has; the first is the usual lead. */
export const quantitiesOfKind: Record<PlaceKind, readonly PlaceQuantityKey[]> = {
  entrance: ['crossSea', 'alongSea', 'placeHeight'],
  breakwater: ['overtopping', 'largestVolume', 'placeHeight'],
  berth: ['longSwell'],
  beach: ['breakerHeight', 'runUp', 'setUp', 'longshoreCurrent'],
}

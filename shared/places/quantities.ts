/** The registry of what is told of places: name, unit and decimals in which people read it. Values are SI. */
import type { PlaceQuantityKey } from '../schemas/placeQuantity.ts'

export interface PlaceQuantity {
  key: PlaceQuantityKey
  name: string
  /** Value in `unit` is `toUnit` times the SI value. */
  unit: string
  toUnit: number
  decimals: number
  /** Range of a limit, SI. */
  least: number
  most: number
}

const metres = { unit: 'm', toUnit: 1, decimals: 2, least: 0.01, most: 25 }

const rows: Record<PlaceQuantityKey, Omit<PlaceQuantity, 'key'>> = {
  placeHeight: { name: 'Height here, all systems', ...metres },
  crossSea: { name: 'Cross-sea', ...metres },
  alongSea: { name: 'Along-sea', ...metres },
  overtopping: { name: 'Mean overtopping', unit: 'l/s per m', toUnit: 1000, decimals: 2, least: 1e-5, most: 1 },
  largestVolume: { name: 'Largest single volume', unit: 'l per m', toUnit: 1000, decimals: 0, least: 0.001, most: 100 },
  longSwell: { name: 'Long swell', ...metres, most: 5 },
  breakerHeight: { name: 'Breakers, significant', ...metres, decimals: 1 },
  runUp: { name: 'Run-up, 2 % exceeded', ...metres },
  setUp: { name: 'Set-up', ...metres, most: 5 },
  longshoreCurrent: { name: 'Longshore current', unit: 'm/s', toUnit: 1, decimals: 2, least: 0.05, most: 5 },
}

export const placeQuantityOf = (key: PlaceQuantityKey): PlaceQuantity => ({ key, ...rows[key] })

/** A place's series as its drawings take it: in the unit that is read. */
import { placeQuantityOf } from '../../../shared/places/quantities.ts'
import type { PlaceSeriesPoint } from '../../../shared/schemas/placeOutlook.ts'
import type { PlaceQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import { heightIn, speedIn } from '../../../shared/units.ts'
import { heightUnit, speedUnit } from '../../figures/shown.ts'
import type { TrendPoint } from '../drawings/geometry/trendLayout.ts'

/** An SI value in the unit in which people read the quantity. */
export function readIn(key: PlaceQuantityKey, value: number | null): number | null {
  if (value === null) return null
  const { unit, toUnit } = placeQuantityOf(key)
  if (unit === 'm') return heightIn(heightUnit(), value)
  return unit === 'm/s' ? speedIn(speedUnit(), value) : value * toUnit
}

export const trendPoints = (key: PlaceQuantityKey, series: readonly PlaceSeriesPoint[]): TrendPoint[] =>
  series.map(({ at, value, likelyFrom, likelyTo, isSubstitute, qualityFlag }) => ({
    ms: Date.parse(at),
    value: qualityFlag === 4 || qualityFlag === 9 ? null : readIn(key, value),
    from: readIn(key, likelyFrom),
    to: readIn(key, likelyTo),
    isSubstitute,
  }))

/** Which of two answers about a place is the newer one, and what an outlook adds to the 12 h trends. Pure. */
import type { PlaceView } from '../../shared/schemas/place.ts'
import type { OutlookView, PlaceSeriesPoint } from '../../shared/schemas/placeOutlook.ts'
import type { PlaceQuantityKey } from '../../shared/schemas/placeQuantity.ts'

const seriesMs = 12 * 3_600_000

function isOlderOutlook(next: OutlookView | null, held: OutlookView | null): boolean {
  if (!held) return false
  if (!next) return true
  const difference = Date.parse(next.windowEndsAt) - Date.parse(held.windowEndsAt)
  return difference < 0 || (difference === 0 && next.revision < held.revision)
}

/** The place as REST or the wire gives it; an outlook that was overtaken does not replace the newer one. */
export function withPlace(held: PlaceView | undefined, next: PlaceView): PlaceView {
  if (!held || next.version > held.version) return next
  if (next.version < held.version) return held
  return isOlderOutlook(next.outlook, held.outlook) ? { ...next, outlook: held.outlook, lastGood: held.lastGood } : next
}

/** Null where the outlook does not speak of the quantity: a gap, as a missing window is. */
export function placePointOf(outlook: OutlookView, quantity: PlaceQuantityKey): PlaceSeriesPoint | null {
  const found = outlook.figures.find((one) => one.quantity === quantity)
  if (!found) return null
  const { value, sd, likely } = found.figure
  return {
    ...{ at: outlook.windowEndsAt, value, sd, qualityFlag: found.qualityFlag },
    ...{ likelyFrom: likely?.from ?? null, likelyTo: likely?.to ?? null },
    stationId: outlook.source?.stationId ?? null,
    isSubstitute: outlook.source?.isSubstitute ?? false,
  }
}

/** Rising in time, the last 12 h; a later word about the same window replaces the earlier one. */
export function withPlacePoints(
  held: readonly PlaceSeriesPoint[],
  next: readonly PlaceSeriesPoint[],
): PlaceSeriesPoint[] {
  const byTime = new Map(held.map((point) => [point.at, point]))
  for (const point of next) byTime.set(point.at, point)
  const all = [...byTime.values()].sort((a, b) => Date.parse(a.at) - Date.parse(b.at))
  const newest = all.at(-1)
  return newest ? all.filter((point) => Date.parse(point.at) > Date.parse(newest.at) - seriesMs - 60_000) : all
}

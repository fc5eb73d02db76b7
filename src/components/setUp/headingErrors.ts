/** Which of the design check's directions are drawn, and which loss is the worst of them. Pure. */
import type { DesignCheck } from '../../../shared/schemas/stationSetUpDesign.ts'
import { isInSector } from '../drawings/geometry/sectors.ts'

export interface ErrorBearing {
  /** Waves come from there, degrees true; past north it goes on above 360. */
  bearing: number
  /** Its place in the check's curves. */
  index: number
}

/** Those of the open sea in their order round the compass; all round it begins at north and ends there. */
export function errorBearings({ directions, question: { openSeaSector } }: DesignCheck): ErrorBearing[] {
  const all = directions.map((bearing, index) => ({ bearing, index }))
  const first = all[0]
  if (!openSeaSector) return first ? [...all, { bearing: first.bearing + 360, index: first.index }] : []
  const [start] = openSeaSector
  return all
    .filter(({ bearing }) => isInSector(bearing, openSeaSector))
    .map(({ bearing, index }) => ({ bearing: bearing < start - 1e-9 ? bearing + 360 : bearing, index }))
    .sort((a, b) => a.bearing - b.bearing)
}

type ErrorCurve = DesignCheck['curves'][number]

/** A loss by which no heading is left is the worst, then the largest error. */
export function worstWithout(check: DesignCheck): ErrorCurve | undefined {
  const order = errorBearings(check)
  const worst = (curve: ErrorCurve): number =>
    Math.max(...order.map(({ index }) => curve.headingSd[index] ?? Number.POSITIVE_INFINITY))
  return check.curves
    .filter((curve) => curve.without !== null)
    .map((curve) => ({ curve, worst: worst(curve) }))
    .sort((a, b) => b.worst - a.worst)[0]?.curve
}

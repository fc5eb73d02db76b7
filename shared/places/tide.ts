/**
 * The tide at a place, out of readings of a tide table or of a gauge: level now, its stage, the next high and the nearest low water. Pure:
 * readings and moment in. Levels in metres above datum, times in ms since 1970 UTC.
 */
import type { TideNow } from '../schemas/placeOutlook.ts'
import type { PlaceSettingsContent } from '../schemas/placeSettings.ts'

export interface LevelReading {
  at: number
  value: number
  /** One standard deviation; null: not known. */
  sd: number | null
}

export interface LevelReadings {
  stationName: string
  /** Rising in time. `measured` of a gauge, `predicted` of a table. */
  measured: LevelReading[]
  predicted: LevelReading[]
}

/** Older or newer readings than this say nothing of a moment. */
const reachMs = 30 * 60_000
/** Within this of an extreme the water stands. */
const standsMs = 15 * 60_000
/** How far the stage looks to both sides where there is no extreme near. */
const slopeMs = 20 * 60_000
const hourMs = 3_600_000

/** Between its neighbours, or the nearer one where the other is out of reach. */
function levelAt(readings: LevelReading[], at: number): LevelReading | null {
  const next = readings.findIndex((reading) => reading.at >= at)
  const after = next < 0 ? undefined : readings[next]
  const before = next < 0 ? readings.at(-1) : readings[next - 1]
  const isNear = (reading: LevelReading | undefined): reading is LevelReading =>
    reading !== undefined && Math.abs(reading.at - at) <= reachMs
  if (isNear(before) && isNear(after) && after.at > before.at) {
    const share = (at - before.at) / (after.at - before.at)
    const sd = before.sd === null || after.sd === null ? null : Math.max(before.sd, after.sd)
    return { at, value: before.value + share * (after.value - before.value), sd }
  }
  if (isNear(after)) return after
  return isNear(before) ? before : null
}

interface Extreme {
  at: number
  level: number
  kind: 'high' | 'low'
}

/** Turning points of a curve with steps of half an hour at most, by a parabola through three readings. */
export function extremesOf(readings: LevelReading[]): Extreme[] {
  return readings.flatMap((middle, n): Extreme[] => {
    const [before, after] = [readings[n - 1], readings[n + 1]]
    if (!before || !after || after.at - middle.at > reachMs || middle.at - before.at > reachMs) return []
    const isHigh = middle.value > before.value && middle.value >= after.value
    const isLow = middle.value < before.value && middle.value <= after.value
    if (!isHigh && !isLow) return []
    // Times in steps from the middle, which need not be even.
    const [a, b] = [(before.at - middle.at) / hourMs, (after.at - middle.at) / hourMs]
    const [u, v] = [before.value - middle.value, after.value - middle.value]
    const curve = (u / a - v / b) / (a - b)
    const slope = u / a - curve * a
    const shift = curve === 0 ? 0 : -slope / (2 * curve)
    const level = middle.value + shift * (slope + curve * shift)
    return [{ at: middle.at + shift * hourMs, level, kind: isHigh ? 'high' : 'low' }]
  })
}

function stageAt(readings: LevelReading[], extremes: Extreme[], at: number): TideNow['stage'] {
  const near = extremes.find((extreme) => Math.abs(extreme.at - at) <= standsMs)
  if (near) return near.kind === 'high' ? 'high water' : 'low water'
  const [before, after] = [levelAt(readings, at - slopeMs), levelAt(readings, at) ?? levelAt(readings, at + slopeMs)]
  if (!before || !after || before.value === after.value) return null
  return after.value > before.value ? 'rising' : 'falling'
}

const presented = ({ at, level }: Extreme) => ({ at: new Date(Math.round(at)).toISOString(), level })

/** A measured level goes before a table's, and where neither is there the settings' nominal level stands in and is said. */
export function tideAt(
  readings: LevelReadings | null,
  { nominalLevel }: Pick<PlaceSettingsContent, 'nominalLevel'>,
  at: number,
): TideNow {
  const measured = readings && levelAt(readings.measured, at)
  const predicted = readings && levelAt(readings.predicted, at)
  const now = measured ?? predicted
  const curve = readings ? (readings.predicted.length > 0 ? readings.predicted : readings.measured) : []
  const extremes = extremesOf(curve)
  const highs = extremes.filter(({ kind }) => kind === 'high')
  const lows = extremes.filter(({ kind }) => kind === 'low')
  const high = highs.find((extreme) => extreme.at >= at) ?? null
  const low = lows.reduce<Extreme | null>(
    (best, one) => (best === null || Math.abs(one.at - at) < Math.abs(best.at - at) ? one : best),
    null,
  )
  return {
    level: now?.value ?? nominalLevel.value,
    sd: now ? now.sd : nominalLevel.sd,
    source: measured ? 'measured' : predicted ? 'predicted' : 'nominal',
    stationName: now && readings ? readings.stationName : null,
    stage: stageAt(curve, extremes, at),
    highWater: high && presented(high),
    lowWater: low && presented(low),
  }
}

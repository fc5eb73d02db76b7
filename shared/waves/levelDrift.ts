/**
 * Drift of one sensor's level against the others over days: fouling, a sinking frame or an ageing instrument, which no window of minutes
 * shows. The level of the water itself and the air's pressure are common to all and fall out.
 */
import type { QualityTest } from '../schemas/estimate.ts'
import { median } from './robust.ts'

/** Depth of still water, m, as each sensor's own mean says it, at one time (ms since 1970 UTC). */
export interface LevelSample {
  at: number
  depths: { id: string; waterDepth: number }[]
}

/** Fewer or closer samples say nothing of days. */
const leastSamples = 24
const leastSpanMs = 24 * 3_600_000
const leastSensors = 3

/** One test a sensor; `limit` in m. Not evaluated (2) without a day of samples from three sensors. */
export function levelDrift(samples: readonly LevelSample[], ids: readonly string[], limit: number): QualityTest[] {
  const differences = new Map(ids.map((id) => [id, [] as { at: number; off: number }[]]))
  for (const { at, depths } of [...samples].sort((a, b) => a.at - b.at)) {
    if (depths.length < leastSensors) continue
    const middle = median(Float64Array.from(depths, ({ waterDepth }) => waterDepth))
    for (const { id, waterDepth } of depths) differences.get(id)?.push({ at, off: waterDepth - middle })
  }
  return ids.map((id): QualityTest => {
    const own = differences.get(id) ?? []
    const span = own.length > 1 ? own[own.length - 1].at - own[0].at : 0
    if (own.length < leastSamples || span < leastSpanMs) {
      const detail = `${id}: too few windows of the last days to tell a drift`
      return { test: 'level drift', flag: 2, value: null, limit, detail }
    }
    const quarter = Math.ceil(own.length / 4)
    const middleOf = (some: typeof own) => median(Float64Array.from(some, ({ off }) => off))
    const drift = middleOf(own.slice(-quarter)) - middleOf(own.slice(0, quarter))
    const days = (span / 86_400_000).toFixed(1)
    const detail = `${id}: level moved by ${drift.toFixed(3)} m against the others in ${days} days`
    return { test: 'level drift', flag: Math.abs(drift) > limit ? 3 : 1, value: Math.abs(drift), limit, detail }
  })
}

/** The depth of still water now, from the mean levels that the sensors themselves report. */
import { median } from './robust.ts'
import type { ArraySensor } from './window.ts'

/**
 * Nominal depth plus the mean level of surface sensors, or depth under pressure sensors (gauge dbar): p 10⁴/(ρ g) + height above the
 * bed. Median over the sensors. The nominal depth where nothing usable is reported or the level moves it by more than half.
 */
export function depthFromReadings(
  sensors: readonly ArraySensor[],
  series: readonly Float64Array[],
  nominalDepth: number,
  density: number,
  gravity: number,
): { depth: number; source: 'level' | 'nominal' } {
  const depths = sensors.flatMap((sensor, n) => {
    const level = meanOf(series[n])
    if (level === null) return []
    const depth =
      sensor.kind === 'surface' ? nominalDepth + level : (level * 1e4) / (density * gravity) + sensor.heightAboveBed
    return Math.abs(depth - nominalDepth) <= 0.5 * nominalDepth ? [depth] : []
  })
  if (depths.length === 0) return { depth: nominalDepth, source: 'nominal' }
  return { depth: median(Float64Array.from(depths)), source: 'level' }
}

/** Mean of the middle half: spikes do not move it. Null without samples. */
function meanOf(series: Float64Array): number | null {
  const values = series.filter((value) => value === value).sort()
  if (values.length === 0) return null
  const kept = values.subarray(Math.floor(values.length / 20), Math.ceil((values.length * 19) / 20))
  let sum = 0
  for (const value of kept) sum += value
  return sum / kept.length
}

/**
 * The depth of still water at this moment, from the sensors' own mean level when they tell it: the mean of a surface
 * sensor is the level above the station's datum, the mean of a pressure sensor is the head of water above it.
 */
import type { ArraySensor } from './window.ts'

export interface DepthNow {
  /** m */
  waterDepth: number
  waterDepthSource: 'level' | 'tide' | 'nominal'
}

export interface DepthQuestion {
  sensors: Pick<ArraySensor, 'kind' | 'heightAboveBed'>[]
  /** As in `ArrayWindow`: metres above datum, or dbar of gauge pressure; NaN for missing. */
  series: Float64Array[]
  /** Still water depth below datum, m: what is used when nothing tells the level. */
  nominalDepth: number
  /** Height of the bed against the datum, m; negative below it. */
  levelOfBed: number
  /** Level of water above datum from a tide gauge or a tide table, m; null when there is none. */
  tideLevel: number | null
  gravity: number
  /** kg/m³ */
  density: number
}

const pascalsPerDecibar = 1e4
/** A mean of fewer samples than this share says nothing about the level. */
const leastShare = 0.5
/** Levels further from the nominal depth than this share of it are a fault of a sensor, not a tide. */
const widestDeparture = 0.6

function meanOf(series: Float64Array): number | null {
  let sum = 0
  let count = 0
  for (const value of series) {
    if (Number.isNaN(value)) continue
    sum += value
    count += 1
  }
  return count === 0 || count < series.length * leastShare ? null : sum / count
}

const median = (values: number[]): number | undefined => {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = Math.floor(sorted.length / 2)
  const upper = sorted[middle]
  const lower = sorted[middle - 1]
  if (upper === undefined) return undefined
  return sorted.length % 2 === 1 || lower === undefined ? upper : (lower + upper) / 2
}

/** The median over the sensors, so that one that is wrong by metres does not move it. */
export function waterDepthNow(question: DepthQuestion): DepthNow {
  const { nominalDepth, levelOfBed, gravity, density, tideLevel } = question
  const depths = question.sensors.flatMap((sensor, index) => {
    const mean = meanOf(question.series[index] ?? new Float64Array())
    if (mean === null) return []
    const depth =
      sensor.kind === 'surface'
        ? mean - levelOfBed
        : sensor.heightAboveBed + (mean * pascalsPerDecibar) / (density * gravity)
    return Math.abs(depth - nominalDepth) <= widestDeparture * nominalDepth ? [depth] : []
  })
  const measured = median(depths)
  if (measured !== undefined) return { waterDepth: measured, waterDepthSource: 'level' }
  if (tideLevel !== null) return { waterDepth: tideLevel - levelOfBed, waterDepthSource: 'tide' }
  return { waterDepth: nominalDepth, waterDepthSource: 'nominal' }
}

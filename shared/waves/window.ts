/**
 * What the estimator is given: one window of one array. Arguments in, values out; the clock and the database
 * stay outside.
 */
import type { QualityLimits } from './qualityLimits.ts'

export type SensorKind = 'pressure' | 'surface'

export interface ArraySensor {
  /** Letter or name, unique in the array. */
  id: string
  kind: SensorKind
  /** Metres from the array's origin, true north. */
  east: number
  north: number
  /** Metres above the bed. */
  heightAboveBed: number
  /** One standard deviation of the surveyed position, m; 0.05 where nothing better is known. */
  positionSd?: number
  /** One standard deviation of the sensor's clock, s. */
  clockSd?: number
  /** Known clock offset, s: a value stamped t was taken at t + offset. Applied once, before the fit. */
  clockOffset?: number
}

export interface ArrayWindow {
  sampleRate: number
  sensors: ArraySensor[]
  /**
   * One series a sensor, all of the same length, on one time base; metres above the station's datum for surface
   * sensors, dbar (gauge) for pressure sensors; NaN for a missing sample.
   */
  series: Float64Array[]
  /** Still water depth now, m. */
  waterDepth: number
  waterDepthSource: 'level' | 'tide' | 'nominal'
  /** An hour or more of mean level at a low rate for the surge band, m; absent when there is none. */
  surge?: { sampleRate: number; level: Float64Array }
  settings: EstimateSettings
}

export interface EstimateSettings {
  /** Lowest and highest frequency looked at, Hz. */
  bandFrom: number
  bandTo: number
  gravity: number
  /** kg/m³. */
  density: number
  /** A sensor with a smaller share of usable samples is left out. */
  leastCompleteness: number
  /** Below this height no vector is given, m. */
  leastHeight: number
  /** Lowest pressure response that is corrected for, 0 to 1. */
  leastPressureResponse: number
  /** Longest gap that is bridged by a straight line, s. */
  longestBridgedGap: number
  /** Spike: so many robust standard deviations off what the neighbours say. */
  spikeSigmas: number
  /** Flat line: so many equal samples in a row are suspect, and fail. */
  flatSuspectSamples: number
  flatFailSamples: number
  /** Gross range about the mean, as a share of the depth. */
  rangeShareOfDepth: number
  /** Thresholds of the other QARTOD tests; absent: the usual ones. */
  quality?: QualityLimits | undefined
}

export const defaultEstimateSettings: EstimateSettings = {
  bandFrom: 0.04,
  bandTo: 1,
  gravity: 9.81,
  density: 1025,
  leastCompleteness: 0.8,
  leastHeight: 0.05,
  leastPressureResponse: 0.15,
  longestBridgedGap: 2,
  spikeSigmas: 6,
  flatSuspectSamples: 10,
  flatFailSamples: 30,
  rangeShareOfDepth: 0.8,
}

/** One window made ready: samples checked, sensors chosen and put into the array's own frame, gaps bridged, spectra taken. */
import type { QualityFlag, QualityTest, SensorFinding } from '../schemas/estimate.ts'
import { arrayFrame } from './arrayGeometry.ts'
import type { ArrayFrame } from './arrayGeometry.ts'
import { bridgeGaps } from './bridgeGaps.ts'
import { detrend } from './detrend.ts'
import { checkSeries } from './sensorQuality.ts'
import type { ArrayWindow } from './window.ts'

export interface SensorState {
  id: string
  used: boolean
  flag: QualityFlag
  findings: SensorFinding[]
  completeness: number
}

export interface PreparedArray {
  sensors: SensorState[]
  tests: QualityTest[]
  /** Indices of the usable sensors in the window's order. */
  usable: number[]
  /** Frame of the usable sensors: `frame.order` points into `usable`. */
  frame: ArrayFrame
  /** Detrended and bridged series in the frame's order; unbridged samples are zero. */
  series: Float64Array[]
  missing: Uint8Array[]
  /** Share of samples that carry data in the series used. */
  covered: number
}

/** Share of the record that must be free of long gaps for all sensors to be cut alike. */
const leastCommonShare = 0.7

export interface CheckedArray {
  sensors: SensorState[]
  tests: QualityTest[]
  /** Samples with failed ones missing, in the window's order. */
  clean: Float64Array[]
}

export function checkArray(window: ArrayWindow): CheckedArray {
  const { settings, sampleRate } = window
  const tests: QualityTest[] = []
  const clean: Float64Array[] = []
  const sensors = window.sensors.map((sensor, index): SensorState => {
    const checked = checkSeries(sensor.id, window.series[index], sampleRate, window.waterDepth, settings)
    tests.push(...checked.tests)
    clean.push(checked.clean)
    return {
      id: sensor.id,
      used: checked.completeness >= settings.leastCompleteness && checked.flag !== 4,
      flag: checked.flag,
      findings: checked.findings,
      completeness: checked.completeness,
    }
  })
  return { sensors, tests, clean }
}

/** `leftOut` names sensors that are not to be used although their samples are good. */
export function prepareArray(
  window: ArrayWindow,
  checked: CheckedArray,
  leftOut: readonly number[] = [],
): PreparedArray {
  const { settings, sampleRate } = window
  const { tests, clean } = checked
  const sensors = checked.sensors.map((s, n) => (leftOut.includes(n) ? { ...s, used: false } : s))
  const usable = sensors.flatMap((sensor, index) => (sensor.used ? [index] : []))
  const frame = arrayFrame(usable.map((index) => window.sensors[index]))
  const longest = Math.round(settings.longestBridgedGap * sampleRate)
  const series = frame.order.map((n) => detrend(clean[usable[n]]))
  const missing = series.map((one) => bridgeGaps(one, longest))
  const covered = cutAlike(series, missing)
  return { sensors, tests, usable, frame, series, missing, covered }
}

/**
 * A gap in one sensor alone would cost coherence, so a moment that one sensor lacks is taken from all, unless that leaves too little.
 * Returns the share that is left.
 */
function cutAlike(series: Float64Array[], missing: Uint8Array[]): number {
  const length = series[0]?.length ?? 0
  if (length === 0) return 0
  const common = new Uint8Array(length)
  for (const one of missing) for (let i = 0; i < length; i++) if (one[i]) common[i] = 1
  let left = 0
  for (let i = 0; i < length; i++) if (!common[i]) left++
  if (left / length < leastCommonShare) {
    let present = 0
    for (const one of missing) for (let i = 0; i < length; i++) if (!one[i]) present++
    return present / (length * series.length)
  }
  for (let m = 0; m < series.length; m++) {
    for (let i = 0; i < length; i++) if (common[i]) series[m][i] = 0
    missing[m] = common
  }
  return left / length
}

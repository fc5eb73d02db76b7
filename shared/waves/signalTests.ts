/**
 * QARTOD tests of one sensor's record beside those that take samples out: instrument span, segment shift, acceleration, attenuated signal
 * (water level manual, test 10; waves manual, tests 11 to 13). They look, and leave the samples alone.
 */
import type { QualityTest, SensorFinding } from '../schemas/estimate.ts'
import { detrend } from './detrend.ts'
import type { QualityLimits } from './qualityLimits.ts'
import { robustSpread } from './robust.ts'

export interface SignalTest extends QualityTest {
  finding: SensorFinding
}

const pieces = 8
/** A fastest acceleration within so many robust deviations of all is noise of the instrument, however large. */
const noiseDeviations = 8
const gravity = 9.81

/** `clean` with failed samples missing (NaN), m or dbar. */
export function signalTests(
  id: string,
  raw: Float64Array,
  clean: Float64Array,
  sampleRate: number,
  limits: QualityLimits,
): SignalTest[] {
  return [
    instrumentSpan(id, raw, limits),
    segmentShift(id, clean, limits),
    acceleration(id, clean, sampleRate, limits),
    attenuation(id, clean, limits),
  ]
}

/** Samples outside what the instrument can measure; the caller has to take them out. */
export const isOutside = (value: number, span: QualityLimits['instrumentSpan']): boolean =>
  span !== null && (value < span[0] || value > span[1])

function instrumentSpan(id: string, raw: Float64Array, { instrumentSpan: span }: QualityLimits): SignalTest {
  const test = { test: 'instrument span', finding: 'range' as const }
  if (span === null)
    return { ...test, flag: 2, value: null, limit: null, detail: `${id}: no span of the instrument is set` }
  let outside = 0
  for (const value of raw) if (isOutside(value, span)) outside++
  const detail = `${id}: ${outside} samples outside ${span[0]} to ${span[1]}`
  return { ...test, flag: outside > 0 ? 4 : 1, value: outside, limit: 0, detail }
}

function segmentShift(id: string, clean: Float64Array, limits: QualityLimits): SignalTest {
  const level = detrend(clean)
  const means: number[] = []
  let squares = 0
  let all = 0
  for (let piece = 0; piece < pieces; piece++) {
    const from = Math.floor((piece * level.length) / pieces)
    const to = Math.floor(((piece + 1) * level.length) / pieces)
    let sum = 0
    let count = 0
    for (let i = from; i < to; i++) {
      if (level[i] !== level[i]) continue
      sum += level[i]
      squares += level[i] ** 2
      count++
    }
    all += count
    if (count > (to - from) / 2) means.push(sum / count)
  }
  const shift = means.length > 1 ? Math.max(...means) - Math.min(...means) : 0
  // In a high sea the groups of waves move the mean themselves.
  const limit = Math.max(limits.segmentShift, 0.5 * Math.sqrt(squares / Math.max(1, all)))
  return {
    test: 'segment shift',
    finding: 'level',
    flag: shift > limit ? 3 : 1,
    value: shift,
    limit,
    detail: `${id}: means of ${pieces} pieces differ by ${shift.toFixed(2)}`,
  }
}

function acceleration(id: string, clean: Float64Array, sampleRate: number, limits: QualityLimits): SignalTest {
  const second = new Float64Array(Math.max(0, clean.length - 2))
  for (let i = 0; i < second.length; i++) second[i] = (clean[i] - 2 * clean[i + 1] + clean[i + 2]) * sampleRate ** 2
  let greatest = 0
  for (const value of second) if (Math.abs(value) > greatest) greatest = Math.abs(value)
  const share = greatest / gravity
  const isNoise = greatest <= noiseDeviations * robustSpread(second)
  return {
    test: 'acceleration',
    finding: 'rate',
    flag: share > limits.acceleration && !isNoise ? 3 : 1,
    value: share,
    limit: limits.acceleration,
    detail: `${id}: greatest acceleration ${share.toFixed(2)} of gravity${isNoise ? ', as the noise has it' : ''}`,
  }
}

function attenuation(id: string, clean: Float64Array, limits: QualityLimits): SignalTest {
  const spread = robustSpread(detrend(clean))
  const flag = spread < limits.failDeviation ? 4 : spread < limits.suspectDeviation ? 3 : 1
  return {
    test: 'attenuated signal',
    finding: 'flat-line',
    flag,
    value: spread,
    limit: flag === 4 ? limits.failDeviation : limits.suspectDeviation,
    detail: `${id}: moves by ${spread.toFixed(4)} (one standard deviation)`,
  }
}

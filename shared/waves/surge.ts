/**
 * Height of the long waves (surge, infragravity): H = 4 √m₀ over 0.004 to 0.04 Hz of the mean level of an hour or more, tide taken out
 * by a cubic of least squares, and its spectrum. Welch's spectra of segments of 1024 s.
 */
import { bridgeGaps } from './bridgeGaps.ts'
import { segmentSpectra, welchDensity } from './spectrum.ts'
import { invertSymmetric, times } from './symmetric.ts'

/** Hz. */
export const surgeBand = { from: 0.004, to: 0.04 }
const segmentSeconds = 1024
/** Shorter records say nothing of waves of four minutes, s. */
const leastSeconds = 3600
/** Longest gap bridged, s: a quarter of the shortest wave of the band. */
const longestGap = 6
const leastPresent = 0.95

export interface LongWaves {
  /** H = 4 √m₀ of the band, m. */
  height: number
  /** One-sided, from the bin below the band to the one above it. */
  spectrum: { frequency: number[]; density: number[]; degreesOfFreedom: number }
}

/** Null for a record that is too short or has too many or too long gaps. `level` in metres, missing samples NaN. */
export function longWaves(level: Float64Array, sampleRate: number): LongWaves | null {
  if (level.length < leastSeconds * sampleRate) return null
  const flat = withoutCubic(level)
  const missing = bridgeGaps(flat, Math.round(longestGap * sampleRate))
  const lost = missing.reduce((sum, one) => sum + one, 0)
  if (lost > (1 - leastPresent) * level.length) return null
  const length = 2 ** Math.round(Math.log2(segmentSeconds * sampleRate))
  const spectra = segmentSpectra([flat], sampleRate, length)
  const density = welchDensity(spectra, 0)
  const spectrum: LongWaves['spectrum'] = {
    frequency: [],
    density: [],
    degreesOfFreedom: Math.round(2 * effectiveSegments(spectra.segments)),
  }
  let m0 = 0
  for (let bin = 0; bin < density.length; bin++) {
    const frequency = bin * spectra.step
    if (frequency >= surgeBand.from && frequency <= surgeBand.to) m0 += density[bin] * spectra.step
    if (frequency < surgeBand.from - spectra.step || frequency > surgeBand.to + spectra.step) continue
    spectrum.frequency.push(Number(frequency.toPrecision(6)))
    spectrum.density.push(Number(density[bin].toPrecision(4)))
  }
  return { height: 4 * Math.sqrt(m0), spectrum }
}

/** Metres; null as with `longWaves`. */
export const surgeHeight = (level: Float64Array, sampleRate: number): number | null =>
  longWaves(level, sampleRate)?.height ?? null

/** Independent ones among Hann segments that overlap by half: K / (1 + 2 (K − 1)/K · 1/36) (Welch 1967). */
const effectiveSegments = (segments: number): number => segments / (1 + (2 * (segments - 1)) / segments / 36)

/** A new series without its cubic of least squares; missing samples stay missing. */
function withoutCubic(series: Float64Array): Float64Array {
  const order = 4
  const normal = new Float64Array(order * order)
  const right = new Float64Array(order)
  const place = (i: number) => (2 * i) / (series.length - 1) - 1
  for (let i = 0; i < series.length; i++) {
    if (series[i] !== series[i]) continue
    const u = place(i)
    for (let a = 0; a < order; a++) {
      right[a] += series[i] * u ** a
      for (let b = 0; b < order; b++) normal[a * order + b] += u ** (a + b)
    }
  }
  const inverse = invertSymmetric(order, normal)
  if (!inverse) return series.slice()
  const cubic = times(order, inverse, right)
  return series.map((value, i) => {
    const u = place(i)
    return value - (cubic[0] + u * (cubic[1] + u * (cubic[2] + u * cubic[3])))
  })
}

/**
 * Height of the long waves (surge, infragravity): H = 4 √m₀ over 0.004 to 0.04 Hz of the mean level of an hour or more, tide taken out
 * by a cubic of least squares. Welch's spectra of segments of 1024 s.
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

/** Metres; null for a record that is too short or has too many or too long gaps. `level` in metres, missing samples NaN. */
export function surgeHeight(level: Float64Array, sampleRate: number): number | null {
  if (level.length < leastSeconds * sampleRate) return null
  const flat = withoutCubic(level)
  const missing = bridgeGaps(flat, Math.round(longestGap * sampleRate))
  const lost = missing.reduce((sum, one) => sum + one, 0)
  if (lost > (1 - leastPresent) * level.length) return null
  const length = 2 ** Math.round(Math.log2(segmentSeconds * sampleRate))
  const spectra = segmentSpectra([flat], sampleRate, length)
  const density = welchDensity(spectra, 0)
  let m0 = 0
  for (let bin = 0; bin < density.length; bin++) {
    const frequency = bin * spectra.step
    if (frequency >= surgeBand.from && frequency <= surgeBand.to) m0 += density[bin] * spectra.step
  }
  return 4 * Math.sqrt(m0)
}

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

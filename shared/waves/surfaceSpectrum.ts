/**
 * The one-dimensional spectrum of the surface as people read it: Welch's estimate with enough degrees of freedom that its shape
 * is the sea's, beside the fine groups that the fit works on.
 */
import type { EstimateResult } from '../schemas/estimate.ts'
import type { ArraySpectra } from './arraySpectra.ts'
import { floorFrom, floorTo, metresPerDecibar } from './arraySpectra.ts'
import { pressureResponse, waveNumber } from './dispersion.ts'
import type { PreparedArray } from './preparedArray.ts'
import { independentAverages, segmentSpectra, welchDensity } from './spectrum.ts'
import { heightWithTail, tailExponent } from './spectralTail.ts'
import type { ArrayWindow } from './window.ts'

type Tail = NonNullable<EstimateResult['spectrum']>['tail']

/** Segments of about two minutes; a longer swell needs finer bins than 0.008 Hz. */
const usualSegmentSeconds = 128
const longSwellSegmentSeconds = 256
const longSwellPeriod = 15

/**
 * Mean over the sensors, each freed of its own noise floor and, for pressure, raised to the surface by linear theory up to the
 * cut-off; m²/Hz. The sensors see one sea, so their number adds no degrees of freedom. Null when the record has no whole segment.
 */
export function surfaceSpectrum(
  window: ArrayWindow,
  prepared: PreparedArray,
  spectra: ArraySpectra,
  peakPeriod: number,
): EstimateResult['spectrum'] {
  const seconds = peakPeriod > longSwellPeriod ? longSwellSegmentSeconds : usualSegmentSeconds
  const length = 2 ** Math.round(Math.log2(seconds * window.sampleRate))
  if (length > prepared.series[0].length) return null
  const segments = segmentSpectra(prepared.series, window.sampleRate, length)
  const first = Math.ceil(window.settings.bandFrom / segments.step)
  const last = Math.floor(spectra.cutoff / segments.step)
  if (last <= first) return null
  const frequency = Array.from({ length: last - first + 1 }, (_, n) => (first + n) * segments.step)
  const density = new Array<number>(frequency.length).fill(0)
  prepared.frame.order.forEach((place, m) => {
    const sensor = window.sensors[prepared.usable[place]]
    const own = welchDensity(segments, m)
    const floor = noiseFloor(own, segments.step, window.sampleRate / 2)
    frequency.forEach((f, n) => {
      const gain = sensor.kind === 'surface' ? 1 : surfacePerDecibar(window, f, sensor.heightAboveBed)
      density[n] += (Math.max(0, own[first + n] - floor) * gain * gain) / (prepared.covered * prepared.series.length)
    })
  })
  return {
    frequency,
    density,
    degreesOfFreedom: Math.round(2 * independentAverages(segments.segments)),
    cutoff: spectra.cutoff,
    tail: tailOf(frequency, density, segments.step, spectra.cutoff),
  }
}

function tailOf(frequency: number[], density: number[], step: number, cutoff: number): Tail {
  const m0 = density.reduce((sum, value) => sum + value * step, 0)
  const last = density.filter((_, n) => frequency[n] > 0.9 * cutoff)
  const atCutoff = last.length > 0 ? last.reduce((sum, value) => sum + value, 0) / last.length : 0
  const height = heightWithTail(4 * Math.sqrt(m0), cutoff, atCutoff)
  return m0 > 0 ? { exponent: tailExponent, significantWaveHeight: height } : null
}

function surfacePerDecibar(window: ArrayWindow, frequency: number, heightAboveBed: number): number {
  const k = waveNumber(2 * Math.PI * frequency, window.waterDepth, window.settings.gravity)
  return metresPerDecibar(window) / pressureResponse(k, window.waterDepth, heightAboveBed)
}

/** Mean density above the waves, in the sensor's own unit²/Hz. */
function noiseFloor(density: Float64Array, step: number, nyquist: number): number {
  const above = density.subarray(Math.ceil((floorFrom * nyquist) / step), Math.floor((floorTo * nyquist) / step) + 1)
  return above.length > 0 ? above.reduce((sum, value) => sum + value, 0) / above.length : 0
}

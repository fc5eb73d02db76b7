/**
 * Single waves of the surface over each sensor, up-crossing to up-crossing (IAHR 1989 list of sea-state parameters; Goda 2010): H_1/3, the
 * highest, T_z. The surface is the record within the band of the spectrum, raised from pressure by linear theory where the sensor
 * lies at the bed; above the cut-off nothing is raised and small waves are missing.
 */
import type { EstimateResult, WaveByWave } from '../schemas/estimate.ts'
import type { ArraySpectra } from './arraySpectra.ts'
import { metresPerDecibar } from './arraySpectra.ts'
import { pressureResponse, waveNumber } from './dispersion.ts'
import { realSeries } from './fourier.ts'
import type { PreparedArray } from './preparedArray.ts'
import { taperShare } from './recordSpectra.ts'
import type { ArraySensor, ArrayWindow } from './window.ts'

export interface SingleWave {
  /** Crest less trough, m. */
  height: number
  /** s */
  period: number
}

/** Fewer waves than this give no height of the highest third. */
const leastWaves = 20

/** Whole waves between up-crossings of zero; those with a `missing` sample are left out. Crossings are placed by straight lines. */
export function upCrossingWaves(
  surface: ArrayLike<number>,
  sampleRate: number,
  missing: ArrayLike<number> = [],
): SingleWave[] {
  const waves: SingleWave[] = []
  let began: number | null = null
  let crest = 0
  let trough = 0
  for (let n = 1; n < surface.length; n++) {
    if (missing[n]) {
      began = null
      continue
    }
    const before = surface[n - 1]
    const here = surface[n]
    if (before < 0 && here >= 0 && !missing[n - 1]) {
      const at = n - 1 + before / (before - here)
      if (began !== null) waves.push({ height: crest - trough, period: (at - began) / sampleRate })
      began = at
      crest = here
      trough = 0
    }
    crest = Math.max(crest, here)
    trough = Math.min(trough, here)
  }
  return waves
}

/** Mean height of the highest third of the waves, m. */
export function meanOfHighestThird(waves: readonly SingleWave[]): number {
  const heights = waves.map(({ height }) => height).sort((a, b) => b - a)
  const third = heights.slice(0, Math.max(1, Math.round(heights.length / 3)))
  return third.reduce((sum, height) => sum + height, 0) / third.length
}

/** Null with too few whole waves. */
export function waveByWave(
  window: ArrayWindow,
  prepared: PreparedArray,
  spectra: ArraySpectra,
): EstimateResult['waveByWave'] {
  const { frame, usable, series, missing } = prepared
  const edge = Math.ceil(taperShare * series[0].length)
  const found = frame.order.flatMap((place, m) => {
    const sensor = window.sensors[usable[place]]
    const surface = surfaceOver(window, spectra, sensor, m).subarray(edge, series[m].length - edge)
    const waves = upCrossingWaves(surface, window.sampleRate, missing[m].subarray(edge, series[m].length - edge))
    return waves.length < leastWaves ? [] : [{ id: sensor.id, kind: sensor.kind, waves }]
  })
  if (found.length === 0) return null
  const mean = (of: (waves: SingleWave[]) => number) =>
    found.reduce((sum, { waves }) => sum + of(waves), 0) / found.length
  const highest = found
    .map(({ id, waves }) => ({ id, height: waves.reduce((most, { height }) => Math.max(most, height), 0) }))
    .reduce((best, one) => (one.height > best.height ? one : best))
  const answer: WaveByWave = {
    significantHeight: mean(meanOfHighestThird),
    greatestHeight: highest.height,
    greatestAt: highest.id,
    meanPeriod: mean((waves) => waves.reduce((sum, { period }) => sum + period, 0) / waves.length),
    waves: mean((waves) => waves.length),
    isReconstructed: found.some(({ kind }) => kind === 'pressure'),
  }
  return answer
}

/** The surface over the sensor with index `m` of the frame, m: right where the taper of the spectra is one. */
function surfaceOver(
  window: ArrayWindow,
  { fine, cutoff }: ArraySpectra,
  sensor: ArraySensor,
  m: number,
): Float64Array {
  const { waterDepth, settings, sampleRate } = window
  const size = Math.round(sampleRate / fine.step)
  const first = Math.round(fine.first / fine.step)
  const count = Math.max(0, Math.min(fine.count, Math.floor((cutoff - fine.first) / fine.step) + 1))
  const raised = new Float64Array(2 * count)
  for (let bin = 0; bin < count; bin++) {
    let gain = 2 / (size * fine.scale)
    if (sensor.kind === 'pressure') {
      const k = waveNumber(2 * Math.PI * (fine.first + bin * fine.step), waterDepth, settings.gravity)
      gain *= metresPerDecibar(window) / pressureResponse(k, waterDepth, sensor.heightAboveBed)
    }
    raised[2 * bin] = fine.series[m][2 * bin] * gain
    raised[2 * bin + 1] = fine.series[m][2 * bin + 1] * gain
  }
  return realSeries(size, first, raised)
}

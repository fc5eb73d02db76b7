/** Height, periods, energy and the one-dimensional spectrum of a window, freed of the sensors' noise. */
import type { EstimateResult } from '../schemas/estimate.ts'
import type { ArraySpectra } from './arraySpectra.ts'
import { noiseDensity } from './bandMatrices.ts'
import type { PreparedArray } from './preparedArray.ts'
import { spectralParameters } from './spectralParameters.ts'
import { surfaceSpectrum } from './surfaceSpectrum.ts'
import { waveByWave } from './waveByWave.ts'
import type { ArrayWindow } from './window.ts'

export function addHeights(
  result: EstimateResult,
  window: ArrayWindow,
  prepared: PreparedArray,
  spectra: ArraySpectra,
): EstimateResult {
  const { bands, energyFactor } = spectra
  const { gravity, density } = window.settings
  const noise = noiseDensity(bands)
  const surface = bands.density.map((d, g) => energyFactor * (d - noise[g]))
  const parameters = spectralParameters(
    bands.frequency,
    bands.width,
    surface,
    window.waterDepth,
    gravity,
    density,
    spectra.duration,
  )
  if (!parameters) return result
  const ownHeights = sensorHeights(spectra)
  const heightOf = new Map(prepared.frame.order.map((n, m) => [prepared.sensors[prepared.usable[n]].id, ownHeights[m]]))
  return {
    ...result,
    significantWaveHeight: parameters.significantWaveHeight,
    significantWaveHeightSd: 0.5 * parameters.samplingError * parameters.significantWaveHeight,
    meanPeriod: parameters.meanPeriod,
    energyPeriod: parameters.energyPeriod,
    energyFlux: parameters.energyFlux,
    sensors: result.sensors.map((s) => ({ ...s, significantWaveHeight: heightOf.get(s.id) ?? null })),
    waveByWave: waveByWave(window, prepared, spectra),
    spectrum: surfaceSpectrum(window, prepared, spectra, 1 / peakFrequency(bands.frequency, surface)),
  }
}

function sensorHeights({ bands, energyFactor }: ArraySpectra): number[] {
  const m = bands.sensors
  return Array.from({ length: m }, (_, i) => {
    let m0 = 0
    for (let g = 0; g < bands.groups; g++)
      m0 += (bands.real[g * m * m + i * m + i] - bands.noise[g * m + i]) * bands.width[g]
    return 4 * Math.sqrt(Math.max(0, energyFactor * m0))
  })
}

/** Frequency of the densest group, Hz: coarse, to choose the length of segments by. */
function peakFrequency(frequency: Float64Array, density: ArrayLike<number>): number {
  let peak = 0
  for (let g = 1; g < frequency.length; g++) if (density[g] > density[peak]) peak = g
  return frequency[peak]
}

/**
 * One window of one array becomes an estimate: check, spectra, systems, vectors, doubts. Pure: the same window gives the same answer,
 * whatever the axes and the order of the sensors.
 */
import { degreesTrue, opposite } from '../directions.ts'
import type { EstimateResult, UnresolvedReason } from '../schemas/estimate.ts'
import { leastAxisRatio } from './arrayGeometry.ts'
import { arraySpectra } from './arraySpectra.ts'
import type { ArraySpectra } from './arraySpectra.ts'
import { prepareArray } from './preparedArray.ts'
import type { PreparedArray } from './preparedArray.ts'
import { phaseSpeed } from './dispersion.ts'
import { sandwichCovariance } from './fitCovariance.ts'
import { spectralParameters } from './spectralParameters.ts'
import { systemVector } from './systemVector.ts'
import { findSystems, noiseDensity } from './waveSystems.ts'
import type { ArrayWindow } from './window.ts'

export function estimate(window: ArrayWindow): EstimateResult {
  const prepared = prepareArray(window)
  const blank = blankResult(window, prepared)
  if (prepared.usable.length === 0) return refuse(blank, refusalForData(prepared))
  const spectra = arraySpectra(window, prepared)
  if (!spectra) return refuse(blank, 'too-little-data')
  const withHeights = addHeights(blank, window, spectra)
  if (prepared.usable.length < 3) return refuse(withHeights, refusalForData(prepared))
  if (prepared.frame.axisRatio < leastAxisRatio) return refuse(withHeights, 'collinear-array')
  return addSystems(withHeights, window, prepared, spectra)
}

function refusalForData(prepared: PreparedArray): UnresolvedReason {
  const present = prepared.sensors.filter((sensor) => sensor.completeness > 0).length
  const share = prepared.sensors.reduce((sum, s) => sum + s.completeness, 0) / Math.max(1, prepared.sensors.length)
  return present >= 3 && share < 0.5 ? 'too-little-data' : 'too-few-sensors'
}

function refuse(result: EstimateResult, reason: UnresolvedReason): EstimateResult {
  return { ...result, resolved: false, reason, qualityFlag: 4, systems: [] }
}

function blankResult(window: ArrayWindow, prepared: PreparedArray): EstimateResult {
  return {
    resolved: false,
    reason: null,
    qualityFlag: 2,
    significantWaveHeight: null,
    significantWaveHeightSd: null,
    peakPeriod: null,
    meanPeriod: null,
    energyPeriod: null,
    energyFlux: null,
    surgeHeight: null,
    waterDepth: window.waterDepth,
    waterDepthSource: window.waterDepthSource,
    completeness: prepared.sensors.reduce((sum, s) => sum + s.completeness, 0) / Math.max(1, prepared.sensors.length),
    systems: [],
    sensors: prepared.sensors.map((sensor) => ({
      id: sensor.id,
      used: sensor.used,
      qualityFlag: sensor.flag,
      findings: sensor.findings,
      completeness: sensor.completeness,
      significantWaveHeight: null,
      clockOffset: null,
      clockOffsetSd: null,
    })),
    traceSpeeds: [],
    tests: prepared.tests,
    subArrays: [],
    lagResidualRms: null,
    runnerUp: null,
    spectrum: null,
    directionalSpectrum: null,
  }
}

function addHeights(result: EstimateResult, window: ArrayWindow, spectra: ArraySpectra): EstimateResult {
  const { bands } = spectra
  const noise = noiseDensity(bands)
  const surface = bands.density.map((d, g) => d - noise[g])
  const { gravity, density } = window.settings
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
  return {
    ...result,
    significantWaveHeight: parameters.significantWaveHeight,
    significantWaveHeightSd: 0.5 * parameters.samplingError * parameters.significantWaveHeight,
    meanPeriod: parameters.meanPeriod,
    energyPeriod: parameters.energyPeriod,
    energyFlux: parameters.energyFlux,
    spectrum: {
      frequency: Array.from(bands.frequency),
      density: Array.from(surface, (d) => Math.max(0, d)),
      degreesOfFreedom: 2 * bands.averages[Math.floor(bands.groups / 2)],
      cutoff: spectra.cutoff,
    },
  }
}

function addSystems(
  result: EstimateResult,
  window: ArrayWindow,
  prepared: PreparedArray,
  spectra: ArraySpectra,
): EstimateResult {
  const { gravity, leastHeight } = window.settings
  const { x, y, axis } = prepared.frame
  if ((result.significantWaveHeight ?? 0) < leastHeight) return refuse(result, 'no-resolvable-wave')
  const found = findSystems(spectra.bands, x, y, window.waterDepth, gravity)
  if (!found) return refuse(result, 'no-resolvable-wave')
  const { fit } = found
  const covariance = fit.covariance
  const wide = sandwichCovariance(fit)
  const systems = found.peaks.map((peak, j) => {
    const vector = systemVector(fit, covariance, j, peak)
    const honest = systemVector(fit, wide, j, peak)
    const toward = degreesTrue(vector.direction + axis)
    const linearSpeed = phaseSpeed(1 / peak, window.waterDepth, gravity)
    const directionSd = Math.sqrt(Math.max(vector.directionVariance, honest.directionVariance))
    const speedSd = vector.speed * Math.sqrt(Math.max(vector.logSpeedVariance, honest.logSpeedVariance))
    const angle = vector.direction + axis
    let energy = 0
    for (let g = 0; g < fit.model.bands.groups; g++)
      energy += Math.exp(fit.state.logDensity[j * fit.model.bands.groups + g]) * fit.model.bands.width[g]
    return {
      key: j + 1,
      name: 'swell' as const,
      significantWaveHeight: 4 * Math.sqrt(energy),
      significantWaveHeightSd: null,
      peakPeriod: 1 / peak,
      from: opposite(toward),
      toward,
      headingSd: (directionSd * 180) / Math.PI,
      measuredSpeed: vector.speed,
      speed: vector.speed,
      speedSd,
      linearSpeed,
      speedRatio: vector.speed / linearSpeed,
      directionalSpread: (vector.spread * 180) / Math.PI,
      slownessEast: Math.cos(angle) / vector.speed,
      slownessNorth: Math.sin(angle) / vector.speed,
      slownessCovariance: { eastEast: 0, eastNorth: 0, northNorth: 0 },
      band: { from: fit.model.bands.frequency[0], to: fit.model.bands.frequency[fit.model.bands.groups - 1] },
    }
  })
  systems.sort((a, b) => b.significantWaveHeight - a.significantWaveHeight)
  return { ...result, resolved: true, reason: null, qualityFlag: 1, systems, peakPeriod: systems[0].peakPeriod }
}

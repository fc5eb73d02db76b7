/** Finds the trains of waves in the cross-spectral matrices and fits them together by maximum likelihood. */
import { beamSearch } from './beamSearch.ts'
import type { BandMatrices } from './bandMatrices.ts'
import { noiseDensity, selectGroups } from './bandMatrices.ts'
import { phaseSpeed } from './dispersion.ts'
import { fitPeak, jonswapShape } from './jonswap.ts'
import type { PeakFit } from './jonswap.ts'
import { fitSea, quick, thorough } from './seaFit.ts'
import type { SeaFit } from './seaFit.ts'
import type { SeaModel, SeaState } from './seaModel.ts'
import { currentAt, depthAt, directionAt, parametersPerSystem, spreadAt } from './seaModel.ts'
import { spectralPeaks } from './spectralPeaks.ts'

export interface FoundSystems {
  fit: SeaFit
  /** Groups of the whole spectrum that the fit looked at: [from, to). */
  from: number
  to: number
  /** Peak of each system: Hz, peakedness, m²/Hz. */
  peaks: PeakFit[]
  /** Best other cycle: direction (rad), speed ratio and its share of the best beam's power, of the strongest system. */
  runnerUp: { direction: number; speedRatio: number; ratio: number; likelihoodLoss: number } | null
}

/** Band of a system about its peak, as multiples of the peak frequency. */
const bandBelow = 0.7
const bandAbove = 1.9
/** A system with a smaller share of the energy is left out. */
const leastShare = 0.04
const mostSystems = 3

/** Null when nothing stands above the noise. */
export function findSystems(
  bands: BandMatrices,
  x: Float64Array,
  y: Float64Array,
  depth: number,
  gravity: number,
): FoundSystems | null {
  const noise = noiseDensity(bands)
  const surface = bands.density.map((d, g) => d - noise[g])
  const peaks = spectralPeaks(bands.frequency, bands.width, surface, bands.averages)
    .filter((peak) => peak.share >= leastShare)
    .slice(0, mostSystems)
    .map((peak) => fitPeak(bands.frequency, bands.density, bands.averages, noise, peak.frequency))
  if (peaks.length === 0) return null
  const starts = peaks.map((peak) => bestStart(bands, x, y, depth, gravity, peak.peak))
  const lowest = Math.min(...peaks.map((p) => p.peak))
  const highest = Math.max(...peaks.map((p) => p.peak))
  const from = firstGroup(bands, bandBelow * lowest)
  const to = Math.max(from + 4, firstGroup(bands, bandAbove * highest))
  const part = selectGroups(bands, from, Math.min(to, bands.groups))
  const model = seaModel(part, x, y, depth, gravity, peaks)
  const parameters = new Float64Array(model.systems * parametersPerSystem + 1)
  starts.forEach((start, j) => {
    if (start) parameters.set(start.fit.state.parameters.subarray(0, parametersPerSystem), j * parametersPerSystem)
  })
  if (starts.some((start) => !start)) return null
  const fit = fitSea(model, { parameters, logDensity: startDensity(model) }, thorough)
  if (!fit) return null
  const own = peaks.map((peak, j) => (peaks.length === 1 ? peak : ownPeak(fit, j, peak.peak)))
  return { fit, from, to: from + part.groups, peaks: own, runnerUp: starts[0]?.runnerUp ?? null }
}

/** Peak of one train's own density, once the fit has told the trains apart. */
function ownPeak(fit: SeaFit, system: number, near: number): PeakFit {
  const { bands } = fit.model
  const noise = noiseDensity(bands)
  const density = noise.map((n, g) => n + Math.exp(fit.state.logDensity[system * bands.groups + g]))
  return fitPeak(bands.frequency, density, bands.averages, noise, near)
}

export function firstGroup(bands: BandMatrices, frequency: number): number {
  let g = 0
  while (g < bands.groups && bands.frequency[g] < frequency) g++
  return g
}

export function seaModel(
  bands: BandMatrices,
  x: Float64Array,
  y: Float64Array,
  depth: number,
  gravity: number,
  peaks: readonly PeakFit[],
): SeaModel {
  const systems = peaks.length
  const priors = peaks.flatMap(() => [
    { mean: 0, sd: 10 },
    { mean: 0, sd: 1 },
    { mean: Math.log(depth), sd: 0.25 },
    { mean: Math.log(0.3), sd: 1 },
  ])
  priors.push({ mean: 0, sd: 0.7 })
  let densityPrior = null
  if (systems > 1) {
    const mean = new Float64Array(systems * bands.groups)
    peaks.forEach((peak, j) => {
      for (let g = 0; g < bands.groups; g++) {
        const shape = peak.density * jonswapShape(bands.frequency[g], peak.peak, peak.gamma)
        mean[j * bands.groups + g] = Math.log(Math.max(shape, 1e-3 * bands.density[g]))
      }
    })
    densityPrior = { mean, sd: 1 }
  }
  return { bands, x, y, systems, gravity, faults: [], priors, densityPrior }
}

export function startDensity(model: SeaModel): Float64Array {
  const { bands, systems, densityPrior } = model
  const start = new Float64Array(systems * bands.groups)
  for (let g = 0; g < bands.groups; g++) {
    let noise = 0
    for (let i = 0; i < bands.sensors; i++) noise += bands.noise[g * bands.sensors + i] / bands.sensors
    const surface = Math.max(bands.density[g] - noise, 0.05 * bands.density[g])
    let expected = 0
    for (let j = 0; j < systems; j++) expected += densityPrior ? Math.exp(densityPrior.mean[j * bands.groups + g]) : 1
    for (let j = 0; j < systems; j++) {
      const share = densityPrior ? Math.exp(densityPrior.mean[j * bands.groups + g]) / expected : 1
      start[j * bands.groups + g] = Math.log(surface * Math.max(share, 1e-3))
    }
  }
  return start
}

interface Start {
  fit: SeaFit
  runnerUp: FoundSystems['runnerUp']
}

/** Single-train fits of the band about one peak from the best beams; the likeliest wins. */
function bestStart(
  bands: BandMatrices,
  x: Float64Array,
  y: Float64Array,
  depth: number,
  gravity: number,
  peak: number,
): Start | null {
  const from = firstGroup(bands, 0.82 * peak)
  const to = Math.max(from + 3, firstGroup(bands, 1.35 * peak))
  const part = selectGroups(bands, from, Math.min(bands.groups, to))
  const beams = beamSearch(part, x, y, depth, gravity)
  const model = seaModel(part, x, y, depth, gravity, [{ peak, gamma: 3.3, density: 1 }])
  const speed = phaseSpeed(1 / peak, depth, gravity)
  const fits = beams
    .filter((beam) => beam.power > 0.5 * beams[0].power)
    .slice(0, 4)
    .flatMap((beam) => {
      const parameters = Float64Array.of(0, 0, 0, 0, 0)
      parameters[directionAt] = beam.direction
      parameters[currentAt] = Math.max(-1.5, Math.min(1.5, (beam.speedRatio - 1) * speed))
      parameters[depthAt] = Math.log(depth)
      parameters[spreadAt] = Math.log(0.25)
      const state: SeaState = { parameters, logDensity: startDensity(model) }
      const fit = fitSea(model, state, quick)
      return fit ? [{ fit, beam }] : []
    })
    .sort((a, b) => b.fit.evaluation.value - a.fit.evaluation.value)
  if (fits.length === 0) return null
  const best = fits[0]
  const bestDirection = best.fit.state.parameters[directionAt]
  const other = fits.slice(1).find((f) => {
    const turn = Math.abs(f.fit.state.parameters[directionAt] - bestDirection) % (2 * Math.PI)
    const angle = Math.min(turn, 2 * Math.PI - turn)
    return (
      angle > 0.1 || Math.abs(f.fit.state.parameters[currentAt] - best.fit.state.parameters[currentAt]) > 0.05 * speed
    )
  })
  return {
    fit: best.fit,
    runnerUp: other
      ? {
          direction: other.fit.state.parameters[directionAt],
          speedRatio: other.beam.speedRatio,
          ratio: Math.min(1, other.beam.power / best.beam.power),
          likelihoodLoss: best.fit.evaluation.value - other.fit.evaluation.value,
        }
      : null,
  }
}

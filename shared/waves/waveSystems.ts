/** Finds the trains of waves in the cross-spectral matrices and fits them together by maximum likelihood. */
import { beamSearch } from './beamSearch.ts'
import type { BandMatrices } from './bandMatrices.ts'
import { noiseDensity, selectGroups } from './bandMatrices.ts'
import { phaseSpeed } from './dispersion.ts'
import { fitPeak, jonswapShape } from './jonswap.ts'
import type { PeakFit } from './jonswap.ts'
import { fitSea, quick, thorough } from './seaFit.ts'
import type { SeaFit } from './seaFit.ts'
import type { SeaModel } from './seaModel.ts'
import { currentAt, depthAt, directionAt, parameterCount, parametersPerSystem, spreadAt } from './seaModel.ts'
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
/** ln L over unrelated sensors that a train must gain in its own band before it is fitted thoroughly. */
const leastStartGain = 5
/** Usual current across the waves at a nearshore array, m/s: the record must speak clearly for more. */
const usualCrossCurrent = 0.25

/** Null when nothing stands above the noise. */
export function findSystems(
  bands: BandMatrices,
  x: Float64Array,
  y: Float64Array,
  depth: number,
  gravity: number,
): FoundSystems | null {
  const sea: SeaSetting = { bands, x, y, depth, gravity }
  const noise = noiseDensity(bands)
  const surface = bands.density.map((d, g) => d - noise[g])
  const ranges = spectralPeaks(bands.frequency, bands.width, surface, bands.averages, noise)
    .filter((peak) => peak.share >= leastShare)
    .slice(0, mostSystems)
  if (ranges.length === 0) return null
  const candidates = ranges.flatMap((range) => {
    const peak = fitPeak(bands.frequency, bands.density, bands.averages, noise, range.frequency, range)
    const start = bestStart(sea, peak.peak, 0.82 * peak.peak, 1.35 * peak.peak)
    return start && start.gain > leastStartGain ? [{ range, peak, start }] : []
  })
  if (candidates.length === 0) return null
  const peaks = candidates.map((candidate) => candidate.peak)
  const starts = candidates.map((candidate) => candidate.start)
  const first = fitTogether(
    sea,
    peaks,
    candidates.map((candidate) => candidate.range),
    starts.map((start) => start.parameters),
  )
  if (!first) return null
  const split = peaks.length < mostSystems ? splitByHeading(sea, first) : null
  return { ...(split ?? first), runnerUp: starts[0].runnerUp }
}

interface SeaSetting {
  bands: BandMatrices
  x: Float64Array
  y: Float64Array
  depth: number
  gravity: number
}

interface Range {
  from: number
  to: number
}

type FittedTogether = Omit<FoundSystems, 'runnerUp'> & { ranges: Range[] }

function fitTogether(
  sea: SeaSetting,
  peaks: readonly PeakFit[],
  ranges: Range[],
  starts: readonly Float64Array[],
): FittedTogether | null {
  const { bands, x, y, depth, gravity } = sea
  const from = firstGroup(bands, bandBelow * Math.min(...peaks.map((p) => p.peak)))
  const to = Math.min(
    bands.groups,
    Math.max(from + 4, firstGroup(bands, bandAbove * Math.max(...peaks.map((p) => p.peak)))),
  )
  const model = seaModel(selectGroups(bands, from, to), x, y, depth, gravity, peaks)
  const parameters = new Float64Array(model.systems * parametersPerSystem + 1)
  starts.forEach((start, j) => parameters.set(start.subarray(0, parametersPerSystem), j * parametersPerSystem))
  const fit = fitSea(model, { parameters, logDensity: startDensity(model) }, thorough)
  if (!fit) return null
  const own = peaks.map((peak, j) => (peaks.length === 1 ? peak : ownPeak(fit, j, peak.peak, ranges[j])))
  return { fit, from, to, peaks: own, ranges }
}

/** Score of a turn of heading at a frequency, in standard deviations, from which a hidden second train is looked for. */
const turningScore = 4.5
/** ln L that a hidden train must gain, and the least difference of heading, rad. */
const leastTrainGain = 15
const leastTurn = 0.2

/**
 * A swell and a wind sea whose peaks run together in the spectrum still differ in heading: where the heading of a fitted train
 * turns with frequency, the band is split there and both parts are fitted together.
 */
function splitByHeading(sea: SeaSetting, found: FittedTogether): FittedTogether | null {
  const { fit, peaks, ranges } = found
  const { bands } = fit.model
  let best = { score: turningScore, system: -1, group: 0 }
  peaks.forEach((_, j) => {
    const turning = turnOfHeading(fit, j)
    if (turning.score > best.score) best = { ...turning, system: j }
  })
  if (best.system < 0) return null
  const border = bands.frequency[best.group]
  const peak = peaks[best.system].peak
  const low = { from: Math.min(0.6 * peak, 0.7 * border), to: border }
  const high = { from: border, to: Math.min(ranges[best.system].to, 2.2 * border) }
  const parts = [low, high]
  const noise = noiseDensity(sea.bands)
  const places = [Math.min(peak, 0.85 * border), Math.max(1.15 * border, peak)]
  const parted = parts.map((range, n) =>
    fitPeak(sea.bands.frequency, sea.bands.density, sea.bands.averages, noise, places[n], range),
  )
  const starts = parts.flatMap((range, n) => bestStart(sea, parted[n].peak, range.from, range.to) ?? [])
  if (starts.length < 2) return null
  const others = peaks.map((_, j) => j).filter((j) => j !== best.system)
  const kept = others.map((j) => fit.state.parameters.slice(j * parametersPerSystem, (j + 1) * parametersPerSystem))
  const joint = fitTogether(
    sea,
    [...others.map((j) => peaks[j]), ...parted],
    [...others.map((j) => ranges[j]), ...parts],
    [...kept, ...starts.map((start) => start.parameters)],
  )
  if (!joint) return null
  const at = others.length * parametersPerSystem + directionAt
  const turn = joint.fit.state.parameters[at] - joint.fit.state.parameters[at + parametersPerSystem]
  const gain = likelihoodOn(joint, found) - fit.evaluation.dataValue
  return gain > leastTrainGain && 2 * Math.abs(Math.sin(turn / 2)) > leastTurn ? joint : null
}

/** ln L of a fit over the groups that another fit looked at: only comparable where the groups are the same. */
function likelihoodOn(joint: FittedTogether, other: FittedTogether): number {
  let value = 0
  for (let g = Math.max(joint.from, other.from); g < Math.min(joint.to, other.to); g++)
    value += joint.fit.evaluation.groupValue[g - joint.from]
  return value
}

/** Where the heading of a train turns most: |Σ scores below| over its standard deviation. */
function turnOfHeading(fit: SeaFit, system: number): { score: number; group: number } {
  const groups = fit.model.bands.groups
  const count = parameterCount(fit.model)
  const at = system * parametersPerSystem + directionAt
  const { groupGradient, groupInformation } = fit.evaluation
  let total = 0
  for (let g = 0; g < groups; g++) total += groupInformation[g * count + at]
  let sum = 0
  let below = 0
  let best = { score: 0, group: 0 }
  for (let g = 0; g + 2 < groups; g++) {
    sum += groupGradient[g * count + at]
    below += groupInformation[g * count + at]
    const variance = (below * (total - below)) / total
    const score = variance > 0 ? Math.abs(sum) / Math.sqrt(variance) : 0
    if (g >= 2 && score > best.score) best = { score, group: g + 1 }
  }
  return best
}

/** Peak of one train's own density, once the fit has told the trains apart. */
function ownPeak(fit: SeaFit, system: number, near: number, range: { from: number; to: number }): PeakFit {
  const { bands } = fit.model
  const noise = noiseDensity(bands)
  const density = noise.map((n, g) => n + Math.exp(fit.state.logDensity[system * bands.groups + g]))
  return fitPeak(bands.frequency, density, bands.averages, noise, near, range)
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
    // No heading is likelier than another.
    { mean: 0, sd: 1e9 },
    { mean: 0, sd: 1 },
    { mean: Math.log(depth), sd: 0.25 },
    { mean: Math.log(0.3), sd: 1 },
    { mean: 0, sd: usualCrossCurrent },
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
  return { bands: withModelError(bands), x, y, systems, gravity, faults: [], priors, densityPrior }
}

/**
 * What no model of the sea explains of a group's own energy: the width of a group alone costs 0.3 % of coherence (see arraySpectra).
 * Without this floor a record with little noise trusts its quietest frequencies without bound, and they turn the heading.
 */
const modelError = 0.004

function withModelError(bands: BandMatrices): BandMatrices {
  const m = bands.sensors
  const noise = bands.noise.map((own, n) => own + modelError * bands.density[Math.floor(n / m)])
  return { ...bands, noise }
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

/** ln L of sensors that share nothing but have their own energies. */
export function unrelatedLikelihood(bands: BandMatrices): number {
  const m = bands.sensors
  let value = 0
  for (let g = 0; g < bands.groups; g++)
    for (let i = 0; i < m; i++) value -= bands.averages[g] * (Math.log(bands.real[g * m * m + i * m + i] + 1e-300) + 1)
  return value
}

interface Start {
  /** Direction, current, ln depth, ln spread. */
  parameters: Float64Array
  runnerUp: FoundSystems['runnerUp']
  /** ln L over unrelated sensors. */
  gain: number
}

/** Single-train fits of the band about one peak from the best beams; the likeliest wins. */
function bestStart(sea: SeaSetting, peak: number, low: number, high: number): Start | null {
  const { bands, x, y, depth, gravity } = sea
  const from = firstGroup(bands, low)
  const to = Math.max(from + 3, firstGroup(bands, high))
  const part = selectGroups(bands, from, Math.min(bands.groups, to))
  if (part.groups < 2) return null
  const beams = beamSearch(part, x, y, depth, gravity)
  const model = seaModel(part, x, y, depth, gravity, [{ peak, gamma: 3.3, density: 1 }])
  const speed = phaseSpeed(1 / peak, depth, gravity)
  const fits = beams
    .filter((beam) => beam.power > 0.5 * beams[0].power)
    .slice(0, 4)
    .flatMap((beam) => {
      const parameters = new Float64Array(parametersPerSystem + 1)
      parameters[directionAt] = beam.direction
      parameters[currentAt] = Math.max(-1.5, Math.min(1.5, (beam.speedRatio - 1) * speed))
      parameters[depthAt] = Math.log(depth)
      parameters[spreadAt] = Math.log(0.25)
      const fit = fitSea(model, { parameters, logDensity: startDensity(model) }, quick)
      return fit ? [{ fit, beam }] : []
    })
    .sort((a, b) => b.fit.evaluation.value - a.fit.evaluation.value)
  if (fits.length === 0) return null
  const best = fits[0]
  const found = best.fit.state.parameters
  const other = fits.slice(1).find(({ fit }) => {
    const turn = fit.state.parameters[directionAt] - found[directionAt]
    return (
      Math.abs(Math.sin(turn / 2)) > 0.05 || Math.abs(fit.state.parameters[currentAt] - found[currentAt]) > 0.05 * speed
    )
  })
  const runnerUp = other && {
    direction: other.fit.state.parameters[directionAt],
    speedRatio: other.beam.speedRatio,
    ratio: Math.min(1, other.beam.power / best.beam.power),
    likelihoodLoss: best.fit.evaluation.value - other.fit.evaluation.value,
  }
  const gain = best.fit.evaluation.dataValue - unrelatedLikelihood(part)
  return { parameters: found, runnerUp: runnerUp ?? null, gain }
}

/** Finds the trains of waves in the cross-spectral matrices and fits them together by maximum likelihood. */
import { beamSearch } from './beamSearch.ts'
import type { BandMatrices } from './bandMatrices.ts'
import { noiseDensity, selectGroups } from './bandMatrices.ts'
import { phaseSpeed } from './dispersion.ts'
import { hiddenTrain } from './hiddenTrain.ts'
import { fitPeak } from './jonswap.ts'
import type { PeakFit } from './jonswap.ts'
import { fitSea, quick, thorough } from './seaFit.ts'
import type { SeaFit } from './seaFit.ts'
import { currentAt, depthAt, directionAt, parametersPerSystem, spreadAt } from './seaModel.ts'
import { spectralPeaks } from './spectralPeaks.ts'
import { firstGroup, seaModel, startDensity, unrelatedLikelihood } from './trainModel.ts'

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
  let found = first
  while (found.peaks.length < mostSystems) {
    const more = withHiddenTrain(sea, found)
    if (!more) break
    found = more
  }
  return { ...found, runnerUp: starts[0].runnerUp }
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
  const first = firstLook(sea, peaks, ranges, starts)
  return first && lastLook(sea, first)
}

/** All trains together, loosely converged. */
function firstLook(
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
  const fit = fitSea(model, { parameters, logDensity: startDensity(model) }, quick)
  return fit && { fit, from, to, peaks: ownPeaks(fit, peaks), ranges }
}

/** Fully converged, each train now expected to have the shape that the first look gave it. */
function lastLook(sea: SeaSetting, { fit: first, from, to, peaks, ranges }: FittedTogether): FittedTogether | null {
  const model = seaModel(selectGroups(sea.bands, from, to), sea.x, sea.y, sea.depth, sea.gravity, peaks)
  const fit = fitSea(model, first.state, thorough)
  return fit && { fit, from, to, peaks: ownPeaks(fit, peaks), ranges }
}

function ownPeaks(fit: SeaFit, peaks: readonly PeakFit[]): PeakFit[] {
  return peaks.length === 1 ? [...peaks] : peaks.map((_, j) => ownPeak(fit, j))
}

/** Score, in standard deviations, from which a further train is tried. */
const leastScore = 3
/** ln L that a further train must gain, its least difference of heading, rad, and its least share of the energy. */
const leastTrainGain = 15
const leastTurn = 0.2
/** Nearer than this share of its spread to another train, it is that train's own wide flank. */
const leastTurnOverSpread = 0.5
/** Spread that a further train is looked for with, rad. */
const usualSpread = 0.4

/**
 * A swell and a wind sea whose peaks run together in the spectrum still differ in heading: where the fit leaves something from
 * another direction, a train of that direction is fitted beside the others, and kept when the likelihood clearly gains.
 */
function withHiddenTrain(sea: SeaSetting, found: FittedTogether): FittedTogether | null {
  const { fit, peaks, ranges } = found
  const hidden = hiddenTrain(fit)
  if (hidden.score < leastScore) return null
  const { frequency } = fit.model.bands
  const middle = Math.sqrt(frequency[hidden.from] * frequency[hidden.to - 1])
  const beside = peaks.reduce((best, p, j) => (distanceOf(p, middle) < distanceOf(peaks[best], middle) ? j : best), 0)
  const peak = peaks[beside].peak
  const start = new Float64Array(parametersPerSystem)
  start[directionAt] = hidden.direction
  start[depthAt] = Math.log(sea.depth)
  start[spreadAt] = Math.log(usualSpread)
  const starts = peaks.map((_, j) => fit.state.parameters.slice(j * parametersPerSystem, (j + 1) * parametersPerSystem))
  const noise = noiseDensity(sea.bands)
  const sides = [frequency[hidden.to - 1] > 1.05 * peak ? 1 : 0, frequency[hidden.from] < 0.95 * peak ? -1 : 0]
  const first = sides
    .filter((side) => side !== 0)
    .flatMap((side) => {
      const above = side > 0
      const border = above
        ? Math.max(frequency[hidden.from], 1.05 * peak)
        : Math.min(frequency[hidden.to - 1], 0.95 * peak)
      const low = { from: ranges[beside].from, to: border }
      const high = { from: border, to: Math.max(ranges[beside].to, 1.5 * border) }
      const own = above ? high : low
      const near = above ? 1.15 * border : 0.85 * border
      const added = fitPeak(sea.bands.frequency, sea.bands.density, sea.bands.averages, noise, near, own)
      const places = [...ranges.map((kept, j) => (j === beside ? (above ? low : high) : kept)), own]
      return firstLook(sea, [...peaks, added], places, [...starts, start]) ?? []
    })
    .sort((a, b) => b.fit.evaluation.dataValue - a.fit.evaluation.dataValue)
  const joint = first.length > 0 ? lastLook(sea, first[0]) : null
  if (!joint || !isSeparate(joint)) return null
  return likelihoodOn(joint, found) - likelihoodOn(found, joint) > leastTrainGain ? joint : null
}

const distanceOf = (peak: PeakFit, frequency: number): number => Math.abs(Math.log(peak.peak / frequency))

/** Whether the last train is large enough and has a heading of its own. */
function isSeparate({ fit }: FittedTogether): boolean {
  const { bands, systems } = fit.model
  const last = systems - 1
  let all = 0
  let own = 0
  for (let j = 0; j < systems; j++) {
    for (let g = 0; g < bands.groups; g++) {
      const energy = Math.exp(fit.state.logDensity[j * bands.groups + g]) * bands.width[g]
      all += energy
      if (j === last) own += energy
    }
  }
  if (own < leastShare * all) return false
  const heading = (j: number) => fit.state.parameters[j * parametersPerSystem + directionAt]
  const spread = Math.exp(fit.state.parameters[last * parametersPerSystem + spreadAt])
  return Array.from({ length: last }, (_, j) => heading(last) - heading(j)).every(
    (turn) => 2 * Math.abs(Math.sin(turn / 2)) > Math.max(leastTurn, leastTurnOverSpread * spread),
  )
}

/** ln L of a fit over the groups that another fit looked at: only comparable where the groups are the same. */
function likelihoodOn(joint: FittedTogether, other: FittedTogether): number {
  let value = 0
  for (let g = Math.max(joint.from, other.from); g < Math.min(joint.to, other.to); g++)
    value += joint.fit.evaluation.groupValue[g - joint.from]
  return value
}

/**
 * Peak of one train's own density, once the fit has told the trains apart, at the frequencies about it where the train is the larger
 * part: beside them it holds what the fit could not tell apart.
 */
function ownPeak(fit: SeaFit, system: number): PeakFit {
  const { bands, systems } = fit.model
  const densityOf = (j: number, g: number) => Math.exp(fit.state.logDensity[j * bands.groups + g])
  const own = Float64Array.from({ length: bands.groups }, (_, g) => densityOf(system, g))
  let above = 0
  let below = 0
  for (let g = 0; g < bands.groups; g++) {
    const weight = own[g] ** 2 * bands.width[g]
    above += weight * bands.frequency[g]
    below += weight
  }
  const near = above / below
  const rules = (g: number) => {
    let all = 0
    for (let j = 0; j < systems; j++) all += densityOf(j, g)
    return own[g] > 0.5 * all
  }
  const middle = Math.min(bands.groups - 1, firstGroup(bands, near))
  let from = middle
  let to = middle
  while (from > 0 && rules(from - 1)) from--
  while (to + 1 < bands.groups && rules(to + 1)) to++
  const noise = noiseDensity(bands)
  const density = noise.map((n, g) => n + own[g])
  const wide = to - from >= fewestOwnGroups
  const range = wide ? { from: bands.frequency[from], to: bands.frequency[to] } : undefined
  return fitPeak(bands.frequency, density, bands.averages, noise, near, range)
}

/** Groups needed to fit a peak to them alone. */
const fewestOwnGroups = 5

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

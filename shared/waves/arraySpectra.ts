/** From series to cross-spectral matrices of the surface: noise floor, pressure correction, cut-off, groups of frequencies. */
import { bandMatrices } from './bandMatrices.ts'
import type { BandMatrices } from './bandMatrices.ts'
import { groupSpeed, pressureResponse, waveNumber } from './dispersion.ts'
import type { PreparedArray } from './preparedArray.ts'
import { fineSpectra } from './recordSpectra.ts'
import type { FineSpectra } from './recordSpectra.ts'
import type { ArrayWindow } from './window.ts'

export interface ArraySpectra {
  bands: BandMatrices
  /** Highest frequency up to which the surface is claimed, Hz. */
  cutoff: number
  /** What the taper hid of the energy, about 1. */
  energyFactor: number
  /** Length of the record, s. */
  duration: number
  fine: FineSpectra
}

/** Share of Nyquist between which the noise floor is read: above the waves, below the anti-alias filter's last part. */
export const floorFrom = 0.72
export const floorTo = 0.9
/** Greatest turn of phase across a group over the whole array, rad: 0.25 rad costs 0.3 % of coherence. */
const greatestTurn = 0.25
/** Greatest width of a group as a share of its frequency. */
const greatestShare = 0.04
/** A pressure density below so many noise floors is not blown up into surface. */
const leastOverNoise = 2.5

/** 1 dbar of pressure as metres of water: 10⁴ / (ρ g). */
export const metresPerDecibar = (window: ArrayWindow): number =>
  1e4 / (window.settings.density * window.settings.gravity)

/** Null when the record is too short for any group. */
export function arraySpectra(window: ArrayWindow, prepared: PreparedArray): ArraySpectra | null {
  const { settings, sampleRate, waterDepth } = window
  const nyquist = sampleRate / 2
  const top = floorTo * nyquist
  const fine = fineSpectra(prepared.series, sampleRate, settings.bandFrom, top, prepared.covered)
  if (fine.count < 8) return null
  const ordered = prepared.frame.order.map((n) => window.sensors[prepared.usable[n]])
  ordered.forEach((sensor, m) => turnClock(fine.series[m], fine.first, fine.step, sensor.clockOffset ?? 0))
  const noiseFloor = fine.series.map((spectrum) => floorOf(spectrum, fine.first, fine.step, floorFrom * nyquist))
  const highest = Math.min(settings.bandTo, 0.8 * nyquist)
  const k = new Float64Array(fine.count)
  for (let bin = 0; bin < fine.count; bin++)
    k[bin] = waveNumber(2 * Math.PI * (fine.first + bin * fine.step), waterDepth, settings.gravity)
  let lastBin = Math.min(fine.count, Math.floor((highest - fine.first) / fine.step) + 1)
  const gain = ordered.map((sensor) => {
    const own = new Float64Array(fine.count).fill(1)
    if (sensor.kind === 'surface') return own
    const metres = metresPerDecibar(window)
    for (let bin = 0; bin < fine.count; bin++) {
      const response = pressureResponse(k[bin], waterDepth, sensor.heightAboveBed)
      if (response < settings.leastPressureResponse) lastBin = Math.min(lastBin, bin)
      own[bin] = metres / Math.max(response, 1e-3)
    }
    return own
  })
  const duration = prepared.series[0].length / sampleRate
  const edges = groupEdges(
    fine.first,
    fine.step,
    lastBin,
    duration,
    prepared.frame.aperture,
    waterDepth,
    settings.gravity,
  )
  const anyPressure = ordered.some((sensor) => sensor.kind === 'pressure')
  const all = bandMatrices(fine, edges, gain, noiseFloor)
  const groups = anyPressure ? groupsOverNoise(all) : all.groups
  const bands = groups === all.groups ? all : bandMatrices(fine, edges.slice(0, groups + 1), gain, noiseFloor)
  if (bands.groups < 4) return null
  const factor = fine.energyFactor.reduce((sum, f) => sum + f / fine.energyFactor.length, 0)
  return {
    bands,
    cutoff: bands.frequency[bands.groups - 1] + bands.width[bands.groups - 1] / 2,
    energyFactor: Math.min(1.15, Math.max(0.87, factor)),
    duration,
    fine,
  }
}

/** A value stamped t was taken at t + offset: turns the spectrum back by ω·offset. */
function turnClock(spectrum: Float64Array, first: number, step: number, offset: number): void {
  if (offset === 0) return
  for (let n = 0; n < spectrum.length; n += 2) {
    const angle = 2 * Math.PI * (first + (n / 2) * step) * offset
    const cos = Math.cos(angle)
    const sin = Math.sin(angle)
    const real = spectrum[n] * cos + spectrum[n + 1] * sin
    spectrum[n + 1] = spectrum[n + 1] * cos - spectrum[n] * sin
    spectrum[n] = real
  }
}

function floorOf(spectrum: Float64Array, first: number, step: number, from: number): number {
  let sum = 0
  let count = 0
  for (let n = 0; n < spectrum.length; n += 2) {
    if (first + (n / 2) * step < from) continue
    sum += spectrum[n] ** 2 + spectrum[n + 1] ** 2
    count++
  }
  return count > 0 ? sum / count : 0
}

function groupEdges(
  first: number,
  step: number,
  lastBin: number,
  duration: number,
  aperture: number,
  depth: number,
  gravity: number,
): number[] {
  const edges = [0]
  let at = 0
  while (at < lastBin) {
    const f = first + at * step
    const byTurn = (greatestTurn * groupSpeed(1 / f, depth, gravity)) / (2 * Math.PI * Math.max(aperture, 1e-6))
    const width = Math.max(1.6 / duration, Math.min(greatestShare * f, byTurn))
    at = Math.min(lastBin, at + Math.max(1, Math.round(width / step)))
    edges.push(at)
  }
  return edges
}

/** Groups up to the first one past the peak where the density has sunk to the noise. */
function groupsOverNoise(bands: BandMatrices): number {
  const m = bands.sensors
  let peak = 0
  const over = Array.from({ length: bands.groups }, (_, g) => {
    let noise = 0
    for (let i = 0; i < m; i++) noise += bands.noise[g * m + i] / m
    if (bands.density[g] - noise > bands.density[peak]) peak = g
    return bands.density[g] / Math.max(noise, 1e-30)
  })
  for (let g = 0; g + 2 < bands.groups; g++) {
    if (g > peak && (over[g] + over[g + 1] + over[g + 2]) / 3 < leastOverNoise) return g
  }
  return bands.groups
}

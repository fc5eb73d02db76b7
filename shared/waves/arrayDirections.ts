/**
 * Directional density of the sea by frequency, of any shape and number of trains, by IMLM, with the conventional beam and Capon's
 * method beside it. Neighbouring groups are put together until
 * the matrix has twice as many averages as sensors; the directions are steered with the wave numbers of still water.
 */
import type { z } from 'zod'
import type { besideMethod, EstimateResult } from '../schemas/estimate.ts'
import type { ArrayFrame } from './arrayGeometry.ts'
import type { ArraySpectra } from './arraySpectra.ts'
import { noiseDensity } from './bandMatrices.ts'
import { capon, conventional, iteratedCapon, steering } from './directionalMethods.ts'
import { waveNumber } from './dispersion.ts'
import { complexMatrix } from './waveMatrices.ts'
import type { ComplexMatrix } from './waveMatrices.ts'

/** Degrees between directions. */
const step = 5
/** Noise granted beside the sensors' own, share of the energy, so that no matrix is nearly singular. */
const granted = 0.02
/** Averages wanted for each sensor; frequencies with a smaller density than this share of the highest are left out. */
const averagesASensor = 2
const leastDensity = 0.01
/** Share of the energy at frequencies that must have settled for the whole to count as converged. */
const settledShare = 0.95

/** Densities below this share of the highest are kept as nothing. */
const leastShare = 1e-4
/** The other methods keep every so many directions. */
const besideEvery = 2

/** Densities in m²/Hz/degree with three digits, directions toward, degrees true; null where no frequency has enough averages. */
export function arrayDirections(
  spectra: ArraySpectra,
  frame: ArrayFrame,
  depth: number,
  gravity: number,
): EstimateResult['directionalSpectrum'] {
  const count = 360 / step
  const stretches = mergeGroups(spectra)
  const frequency: number[] = []
  const density: number[][] = []
  const beam: number[][] = []
  const maximumLikelihood: number[][] = []
  let energy = 0
  let settled = 0
  for (const stretch of stretches) {
    const k = waveNumber(2 * Math.PI * stretch.frequency, depth, gravity)
    const steer = steering(frame.x, frame.y, k, count, Math.PI / 2 - frame.axis)
    const found = iteratedCapon(steer, stretch.coherence, stretch.noise)
    const likeliest = capon(steer, stretch.coherence)
    if (!found || !likeliest) continue
    energy += stretch.energy
    if (found.converged) settled += stretch.energy
    frequency.push(stretch.frequency)
    density.push(byBearing(found.share, stretch.density))
    beam.push(byBearing(conventional(steer, stretch.coherence), stretch.density))
    maximumLikelihood.push(byBearing(likeliest, stretch.density))
  }
  if (frequency.length === 0) return null
  const directions = Array.from({ length: count }, (_, d) => d * step)
  const beside = [inHundredths('conventional', beam), inHundredths('Capon', maximumLikelihood)]
  return {
    method: 'IMLM',
    converged: settled >= settledShare * energy,
    frequency,
    directions,
    density: rounded(density),
    beside,
  }
}

/** Far below the error of any of them; what is nothing beside the highest is kept as nothing. */
function rounded(density: readonly number[][]): number[][] {
  const highest = Math.max(...density.map((row) => Math.max(...row)))
  return density.map((row) => row.map((value) => (value < leastShare * highest ? 0 : Number(value.toPrecision(3)))))
}

/** Densities per degree toward 0, 5, 10 … degrees true: the angles run anticlockwise from north, bearings clockwise. */
function byBearing(share: Float64Array, density: number): number[] {
  const count = share.length
  return Array.from({ length: count }, (_, d) => (density * share[(count - d) % count]) / step)
}

/** Coarse on purpose: the detail of every minute is kept, and these two are there to look at. */
function inHundredths(method: string, density: readonly number[][]): z.infer<typeof besideMethod> {
  const highest = Math.max(...density.map((row) => Math.max(...row)))
  const hundredths = density.map((row) =>
    row.flatMap((value, d) => (d % besideEvery === 0 ? Math.round((100 * value) / highest) : [])),
  )
  return { method, highest: Number(highest.toPrecision(3)), hundredths }
}

interface Stretch {
  frequency: number
  /** m²/Hz of the surface, noise taken out; m² in the stretch. */
  density: number
  energy: number
  coherence: ComplexMatrix
  /** Share of the density. */
  noise: number
}

function mergeGroups({ bands, energyFactor }: ArraySpectra): Stretch[] {
  const m = bands.sensors
  const noise = noiseDensity(bands)
  const surface = bands.density.map((d, g) => d - noise[g])
  const least = leastDensity * surface.reduce((most, d) => Math.max(most, d), 0)
  const stretches: Stretch[] = []
  let from = 0
  while (from < bands.groups) {
    let to = from
    let averages = 0
    while (to < bands.groups && averages < averagesASensor * m) averages += bands.averages[to++]
    const whole = { real: new Float64Array(m * m), imag: new Float64Array(m * m) }
    let width = 0
    let energy = 0
    let floor = 0
    let moment = 0
    for (let g = from; g < to; g++) {
      for (let n = 0; n < m * m; n++) {
        whole.real[n] += bands.width[g] * bands.real[g * m * m + n]
        whole.imag[n] += bands.width[g] * bands.imag[g * m * m + n]
      }
      width += bands.width[g]
      energy += bands.width[g] * surface[g]
      floor += bands.width[g] * noise[g]
      moment += bands.width[g] * bands.density[g] * bands.frequency[g]
    }
    const isWhole = averages >= averagesASensor * m
    if (isWhole && energy > least * width) {
      const own = floor / energy + granted
      stretches.push({
        frequency: moment / (energy + floor),
        density: (energyFactor * energy) / width,
        energy,
        coherence: coherencesOf(m, whole, floor / energy, own),
        noise: own,
      })
    }
    from = to
  }
  return stretches
}

/** Coherences of the surface: each sensor by its own energy, with the noise on the diagonal. */
function coherencesOf(m: number, whole: ComplexMatrix, floor: number, noise: number): ComplexMatrix {
  const out = complexMatrix(m)
  for (let i = 0; i < m; i++) {
    for (let j = 0; j < m; j++) {
      const size = (1 + floor) / Math.sqrt(whole.real[i * m + i] * whole.real[j * m + j])
      out.real[i * m + j] = i === j ? 1 + noise : size * whole.real[i * m + j]
      out.imag[i * m + j] = i === j ? 0 : size * whole.imag[i * m + j]
    }
  }
  return out
}

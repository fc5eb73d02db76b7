/**
 * A repeatable Gaussian sea over an array, many directions at every frequency, by linear theory written out here, apart from the
 * program's: what the accuracy of the estimator is measured on. Sources: JONSWAP (Hasselmann et al. 1973), cos^2s spreading
 * (Longuet-Higgins, Cartwright & Smith 1963), pressure response of linear waves.
 */
import FFT from 'fft.js'
import { defaultEstimateSettings } from '../../shared/waves/window.ts'
import type { ArrayWindow } from '../../shared/waves/window.ts'

export interface SeededTrain {
  /** Degrees true, direction of travel. */
  toward: number
  peakPeriod: number
  height: number
  /** Circular spread, degrees; 0 for one direction at all frequencies. */
  spread: number
  gamma: number
}

export interface SeaRecipe {
  seed: number
  trains: SeededTrain[]
  depth: number
  positions: { east: number; north: number }[]
  sampleRate: number
  seconds: number
  /** Root mean square of the sensors' white noise, metres of water. */
  noise: number
  /** Metres above the bed of pressure sensors; absent for surface sensors. */
  heightAboveBed?: number
  /** Current along the first train's heading and across it to the left, m/s. */
  current?: { along: number; across: number }
  /** Depth that the estimator is told, m; the true one when absent. */
  statedDepth?: number
}

const g = 9.81

/** Small repeatable generator (mulberry32): numbers in 0 to 1. */
export function seededDice(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6d2b79f5) >>> 0
    let t = state
    t = Math.imul(t ^ (t >>> 15), t | 1)
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61)
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
}

export const seededNormal = (next: () => number) => (): number =>
  Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next())

/** ω² = g k tanh kh by halving. */
export function linearWaveNumber(omega: number, depth: number): number {
  let low = 0
  let high = Math.max((omega * omega) / g, omega / Math.sqrt(g * depth)) * 1.5
  for (let i = 0; i < 60; i++) {
    const k = (low + high) / 2
    if (g * k * Math.tanh(k * depth) < omega * omega) low = k
    else high = k
  }
  return (low + high) / 2
}

/** ω = √(g k tanh kh) + k U by Newton's method from still water; U is the current along the wave, m/s. */
export function wavenumberOnCurrent(omega: number, depth: number, current: number): number {
  let k = linearWaveNumber(omega, depth)
  if (current === 0) return k
  for (let i = 0; i < 20; i++) {
    const t = Math.tanh(k * depth)
    const sigma = Math.sqrt(g * k * t)
    k -= (sigma + k * current - omega) / ((g * (t + k * depth * (1 - t * t))) / (2 * sigma) + current)
  }
  return k
}

/** Shape alone; the caller scales it to the height. */
function jonswap(f: number, peak: number, gamma: number): number {
  const sigma = f <= peak ? 0.07 : 0.09
  const bump = Math.exp(-0.5 * ((f / peak - 1) / sigma) ** 2)
  return f < 0.3 * peak ? 0 : f ** -5 * Math.exp(-1.25 * (peak / f) ** 4) * gamma ** bump
}

/** Density of a train at a frequency, m²/Hz, scaled to its height. */
export function jonswapDensity({ peakPeriod, height, gamma }: SeededTrain): (frequency: number) => number {
  const peak = 1 / peakPeriod
  const step = peak / 200
  let sum = 0
  for (let n = 1; n < 1600; n++) sum += jonswap(n * step, peak, gamma) * step
  return (f) => ((height ** 2 / 16) * jonswap(f, peak, gamma)) / sum
}

const mostDirections = 60

/** Directions about the mean (rad), evenly over what cos^2s leaves, and the square roots of their shares. */
function spreadDirections(spread: number): { offset: number[]; share: number[] } {
  if (spread === 0) return { offset: [0], share: [1] }
  const sigma = (spread * Math.PI) / 180
  const s = 2 / sigma ** 2 - 1
  const reach = Math.min(Math.PI, 5 * sigma)
  const offset = Array.from({ length: mostDirections }, (_, n) => reach * ((2 * n + 1) / mostDirections - 1))
  const weight = offset.map((d) => Math.cos(d / 2) ** (2 * s))
  const sum = weight.reduce((total, w) => total + w, 0)
  return { offset, share: weight.map((w) => Math.sqrt(w / sum)) }
}

export function seededSea(recipe: SeaRecipe): ArrayWindow {
  const { trains, depth, positions, sampleRate, seconds, heightAboveBed } = recipe
  const next = seededDice(recipe.seed)
  const normal = seededNormal(next)
  const length = Math.round(seconds * sampleRate)
  let size = 2
  // Twice the record, so that it does not repeat itself and its lines lie between the record's own.
  while (size < 1.5 * length) size *= 2
  const fft = new FFT(size)
  const step = sampleRate / size
  const lines = positions.map(() => new Float64Array(2 * size))
  const firstHeading = trains[0].toward
  for (const train of trains) {
    const peak = 1 / train.peakPeriod
    const density = Array.from({ length: size / 2 }, (_, n) => jonswap(n * step, peak, train.gamma))
    const scale = train.height ** 2 / 16 / density.reduce((sum, d) => sum + d * step, 0)
    const { offset, share } = spreadDirections(train.spread)
    const mean = ((90 - train.toward) * Math.PI) / 180
    for (let n = 1; n < size / 2; n++) {
      const variance = scale * density[n] * step
      if (variance < 1e-12) continue
      const k = linearWaveNumber(2 * Math.PI * n * step, depth)
      const response = heightAboveBed === undefined ? 1 : Math.cosh(k * heightAboveBed) / Math.cosh(k * depth)
      // A turn of the grid at every line keeps its directions from standing out.
      const turn = offset.length > 1 ? (next() - 0.5) * (offset[1] - offset[0]) : 0
      for (let d = 0; d < offset.length; d++) {
        const size0 = response * Math.sqrt(variance / 4) * share[d]
        const a = size0 * normal()
        const b = size0 * normal()
        const angle = mean + offset[d] + turn
        const here = recipe.current ? wavenumberOnCurrent(2 * Math.PI * n * step, depth, currentAlong(angle)) : k
        const kx = here * Math.cos(angle)
        const ky = here * Math.sin(angle)
        positions.forEach((p, m) => {
          const phase = kx * p.east + ky * p.north
          const cos = Math.cos(phase)
          const sin = Math.sin(phase)
          lines[m][2 * n] += a * cos + b * sin
          lines[m][2 * n + 1] += b * cos - a * sin
        })
      }
    }
  }
  function currentAlong(angle: number): number {
    const off = angle - ((90 - firstHeading) * Math.PI) / 180
    return (recipe.current?.along ?? 0) * Math.cos(off) + (recipe.current?.across ?? 0) * Math.sin(off)
  }
  const out = new Float64Array(2 * size)
  // x(t) = Σ 2 Re(X e^{iωt}); the transform below is unscaled, its sign turned by taking conjugates.
  const series = lines.map((line) => {
    for (let n = 1; n < size; n += 2) line[n] = -line[n]
    fft.transform(out, line)
    const metres = heightAboveBed === undefined ? 1 : (1025 * g) / 1e4
    const still = heightAboveBed === undefined ? 0 : depth - heightAboveBed
    return Float64Array.from({ length }, (_, i) => metres * (still + 2 * out[2 * i] + recipe.noise * normal()))
  })
  return {
    sampleRate,
    sensors: positions.map(({ east, north }, n) => ({
      id: String.fromCharCode(65 + n),
      kind: heightAboveBed === undefined ? ('surface' as const) : ('pressure' as const),
      east,
      north,
      heightAboveBed: heightAboveBed ?? depth,
      positionSd: 0,
      clockSd: 0,
    })),
    series,
    waterDepth: recipe.statedDepth ?? depth,
    waterDepthSource: 'level',
    settings: defaultEstimateSettings,
  }
}

/** A repeatable random sea over an array, by plain superposition: linear theory written out here, apart from the program's. */
import { defaultEstimateSettings } from '../../../shared/waves/window.ts'
import type { ArrayWindow } from '../../../shared/waves/window.ts'

/** Small repeatable generator (mulberry32): numbers in 0 to 1. */
export function dice(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6d2b79f5) >>> 0
    let t = state
    t = Math.imul(t ^ (t >>> 15), t | 1)
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61)
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
}

export interface SeaOrder {
  seed: number
  /** Degrees true, direction of travel. */
  toward: number
  peakPeriod: number
  height: number
  /** Circular spread, degrees. */
  spread: number
  depth: number
  positions: { east: number; north: number }[]
  sampleRate?: number
  seconds?: number
  noise?: number
}

const g = 9.81

function solveWaveNumber(omega: number, depth: number): number {
  let low = 1e-6
  let high = 10
  for (let i = 0; i < 80; i++) {
    const k = (low + high) / 2
    if (g * k * Math.tanh(k * depth) < omega * omega) low = k
    else high = k
  }
  return (low + high) / 2
}

/**
 * Gaussian-shaped swell spectrum about the peak (10 % wide) in 500 trains. Headings are spread evenly about the mean (a golden-ratio
 * sequence, so that the realised mean is the one asked for) with the root mean square asked for.
 */
export function spreadSea(order: SeaOrder): ArrayWindow {
  const { depth, positions, sampleRate = 2, seconds = 1200, noise = 0.02 } = order
  const next = dice(order.seed)
  const normal = () => Math.sqrt(-2 * Math.log(next() + 1e-12)) * Math.cos(2 * Math.PI * next())
  const count = Math.round(sampleRate * seconds)
  const trains = 500
  const series = positions.map(() => new Float64Array(count))
  const amplitude = (order.height / 4) * Math.sqrt(2 / trains)
  for (let n = 0; n < trains; n++) {
    const frequency = (1 / order.peakPeriod) * Math.exp(0.1 * normal())
    const omega = 2 * Math.PI * frequency
    const k = solveWaveNumber(omega, depth)
    const angle =
      ((90 - order.toward - order.spread * Math.sqrt(12) * ((((n + 0.5) * 0.6180339887498949) % 1) - 0.5)) * Math.PI) /
      180
    const phase = 2 * Math.PI * next()
    const size = amplitude * Math.sqrt(-Math.log(next() + 1e-12))
    positions.forEach((p, m) => {
      const start = phase - k * (p.east * Math.cos(angle) + p.north * Math.sin(angle))
      for (let i = 0; i < count; i++) series[m][i] += size * Math.cos((omega * i) / sampleRate + start)
    })
  }
  for (const one of series) for (let i = 0; i < count; i++) one[i] += noise * normal()
  return windowOf(series, positions, depth, sampleRate)
}

export function windowOf(
  series: Float64Array[],
  positions: readonly { east: number; north: number }[],
  depth: number,
  sampleRate: number,
): ArrayWindow {
  return {
    sampleRate,
    sensors: positions.map(({ east, north }, n) => ({
      id: String.fromCharCode(65 + n),
      kind: 'surface',
      east,
      north,
      heightAboveBed: depth,
    })),
    series,
    waterDepth: depth,
    waterDepthSource: 'nominal',
    settings: defaultEstimateSettings,
  }
}

export const fiveSensors = [
  { east: 0, north: 0 },
  { east: 12, north: 1 },
  { east: 5, north: 10 },
  { east: -8, north: 6 },
  { east: -3, north: -9 },
]

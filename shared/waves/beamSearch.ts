/**
 * Where waves may come from: a conventional beam (Barber 1963) steered over heading and speed, all frequencies of a band together,
 * so that a wrong cycle of a wide array, which fits one frequency, fails at the others.
 */
import type { BandMatrices } from './bandMatrices.ts'
import { waveNumber } from './dispersion.ts'

export interface Beam {
  /** Radians of travel in the frame of the positions. */
  direction: number
  /** Speed as a multiple of linear theory at the stated depth. */
  speedRatio: number
  /** Mean share of the band's energy that the beam explains, 0 to 1. */
  power: number
}

/** Speeds looked at, as multiples of linear theory: an ebb and a wrong depth below, a flood and spread above. */
const slowest = 0.72
const fastest = 1.32

/** Peaks of the beam, strongest first, at most `most`. */
export function beamSearch(
  bands: BandMatrices,
  x: Float64Array,
  y: Float64Array,
  depth: number,
  gravity: number,
  most = 6,
): Beam[] {
  const m = bands.sensors
  const groups = usedGroups(bands)
  const k = groups.map((g) => waveNumber(2 * Math.PI * bands.frequency[g], depth, gravity))
  const weights = groups.map(
    (g) => (bands.averages[g] * bands.density[g]) / (bands.density[g] + mean(bands.noise, g, m)),
  )
  const weightSum = weights.reduce((sum, w) => sum + w, 0)
  let radius = 0
  for (let i = 0; i < m; i++) radius = Math.max(radius, Math.hypot(x[i], y[i]))
  const reach = Math.max(...k) * radius
  const turns = Math.max(48, Math.ceil((2 * Math.PI * reach) / 0.7))
  const speeds = Math.max(5, Math.ceil((Math.log(fastest / slowest) * reach) / 0.7))
  const map = new Float64Array(turns * speeds)
  const steer = new Float64Array(2 * m)
  for (let t = 0; t < turns; t++) {
    const c = Math.cos((2 * Math.PI * t) / turns)
    const s = Math.sin((2 * Math.PI * t) / turns)
    for (let v = 0; v < speeds; v++) {
      const ratio = speedRatioAt(v, speeds)
      let sum = 0
      for (let n = 0; n < groups.length; n++)
        sum += weights[n] * explained(bands, groups[n], x, y, (k[n] / ratio) * c, (k[n] / ratio) * s, steer)
      map[t * speeds + v] = sum / weightSum
    }
  }
  const peaks: Beam[] = []
  for (let t = 0; t < turns; t++) {
    for (let v = 0; v < speeds; v++) {
      const power = map[t * speeds + v]
      if (!isPeak(map, turns, speeds, t, v)) continue
      peaks.push({ direction: (2 * Math.PI * t) / turns, speedRatio: speedRatioAt(v, speeds), power })
    }
  }
  return peaks.sort((a, b) => b.power - a.power).slice(0, most)
}

const speedRatioAt = (v: number, speeds: number): number => slowest * Math.pow(fastest / slowest, v / (speeds - 1))

/** At most forty groups, evenly taken. */
function usedGroups(bands: BandMatrices): number[] {
  const stride = Math.max(1, Math.ceil(bands.groups / 40))
  return Array.from({ length: Math.ceil(bands.groups / stride) }, (_, n) => n * stride)
}

function mean(noise: Float64Array, g: number, m: number): number {
  let sum = 0
  for (let i = 0; i < m; i++) sum += noise[g * m + i]
  return sum / m
}

/** a* C a / (m tr C) with a = exp(−i k·r). */
function explained(
  bands: BandMatrices,
  g: number,
  x: Float64Array,
  y: Float64Array,
  kx: number,
  ky: number,
  steer: Float64Array,
): number {
  const m = bands.sensors
  const at = g * m * m
  for (let i = 0; i < m; i++) {
    const phase = kx * x[i] + ky * y[i]
    steer[2 * i] = Math.cos(phase)
    steer[2 * i + 1] = -Math.sin(phase)
  }
  let sum = 0
  let trace = 0
  for (let i = 0; i < m; i++) {
    trace += bands.real[at + i * m + i]
    for (let j = 0; j < i; j++) {
      const er = steer[2 * i] * steer[2 * j] + steer[2 * i + 1] * steer[2 * j + 1]
      const ei = steer[2 * i + 1] * steer[2 * j] - steer[2 * i] * steer[2 * j + 1]
      sum += 2 * (bands.real[at + i * m + j] * er + bands.imag[at + i * m + j] * ei)
    }
  }
  return trace > 0 ? (trace + sum) / (m * trace) : 0
}

function isPeak(map: Float64Array, turns: number, speeds: number, t: number, v: number): boolean {
  const here = map[t * speeds + v]
  for (let dt = -1; dt <= 1; dt++) {
    for (let dv = -1; dv <= 1; dv++) {
      if ((dt === 0 && dv === 0) || v + dv < 0 || v + dv >= speeds) continue
      const there = map[((t + dt + turns) % turns) * speeds + v + dv]
      if (there > here || (there === here && (dt < 0 || (dt === 0 && dv < 0)))) return false
    }
  }
  return true
}

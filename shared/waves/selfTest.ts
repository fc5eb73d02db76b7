/**
 * What is run before any estimate is published: values of hand-books, and seas of which the answer is known, made here from a wave
 * number that is solved apart from the program's own. A program that does not reproduce them must not give figures.
 */
import { turnBetween } from '../directions.ts'
import type { EstimateResult } from '../schemas/estimate.ts'
import { groupRatio, groupSpeed, phaseSpeed, pressureResponse, waveNumber } from './dispersion.ts'
import { estimate } from './estimate.ts'
import { firstMoment, spreadExponent } from './spreading.ts'
import { defaultEstimateSettings } from './window.ts'
import type { ArrayWindow } from './window.ts'

export interface SelfCheck {
  name: string
  found: number
  wanted: number
  /** Greatest difference allowed, in the unit of the value. */
  tolerance: number
}

export const hasPassed = ({ found, wanted, tolerance }: SelfCheck): boolean => Math.abs(found - wanted) <= tolerance

const check = (name: string, found: number, wanted: number, tolerance: number): SelfCheck => ({
  name,
  found,
  wanted,
  tolerance,
})

/** All checks, in a fixed order; takes about a second. */
export function selfChecks(): SelfCheck[] {
  return [...handBookChecks(), ...seaChecks()]
}

function handBookChecks(): SelfCheck[] {
  const omega = (2 * Math.PI) / 10
  const depth = (0.1 * 9.81 * 100) / (2 * Math.PI)
  const k = waveNumber(omega, depth)
  return [
    check('Coastal Engineering Manual II-1-1: length of 10 s in 3 m', 10 * phaseSpeed(10, 3), 53.2, 0.05),
    check('Coastal Engineering Manual II-1-1: speed of 10 s in 3 m', phaseSpeed(10, 3), 5.32, 0.005),
    check('Shore Protection Manual C-1: pressure factor at d/L0 0.1', pressureResponse(k, depth, 0), 0.7049, 1e-4),
    check('Shore Protection Manual C-1: n at d/L0 0.1', groupRatio(k, depth), 0.8102, 1e-4),
    check('Shore Protection Manual C-1: d/L at d/L0 0.1', (k * depth) / (2 * Math.PI), 0.14098, 1e-5),
    check('group speed of 9 s in 8 m', groupSpeed(9, 8), 7.236, 0.001),
    check('exponent of a spread of 24.4 degrees', spreadExponent((24.4 * Math.PI) / 180), 10, 0.05),
    check('first moment at exponent 10', firstMoment(Math.sqrt(2 / 11)), 10 / 11, 1e-9),
  ]
}

/** Five sensors some tens of metres apart, none three in a line. */
const positions = [
  [-16, -9],
  [14, -14],
  [-3, 20],
  [4, 2],
  [20, 12],
] as const
const waterDepth = 12
const sampleRate = 2
const samples = 2400

/** ω² = g k tanh kh by halving. */
function solved(omega: number): number {
  let low = 1e-6
  let high = 10
  for (let step = 0; step < 60; step++) {
    const k = (low + high) / 2
    if (9.81 * k * Math.tanh(k * waterDepth) < omega * omega) low = k
    else high = k
  }
  return low
}

interface Train {
  frequency: number
  toward: number
  amplitude: number
  phase: number
}

/** The surface over the array, `turn` degrees of all axes clockwise. */
function windowOf(trains: readonly Train[], turn = 0): ArrayWindow {
  const angle = (turn * Math.PI) / 180
  const places = positions.map(([east, north]) => ({
    east: east * Math.cos(angle) + north * Math.sin(angle),
    north: north * Math.cos(angle) - east * Math.sin(angle),
  }))
  const series = places.map(() => new Float64Array(samples))
  for (const { frequency, toward, amplitude, phase } of trains) {
    const omega = 2 * Math.PI * frequency
    const k = solved(omega)
    const heading = ((toward + turn) * Math.PI) / 180
    places.forEach(({ east, north }, m) => {
      const start = phase - k * (east * Math.sin(heading) + north * Math.cos(heading))
      for (let n = 0; n < samples; n++) series[m][n] += amplitude * Math.cos((omega * n) / sampleRate + start)
    })
  }
  const sensors = places.map((place, m) => ({
    id: String.fromCharCode(65 + m),
    kind: 'surface' as const,
    ...place,
    heightAboveBed: waterDepth,
  }))
  const settings = defaultEstimateSettings
  return { sampleRate, sensors, series, waterDepth, waterDepthSource: 'nominal', settings }
}

const regular: Train[] = [{ frequency: 0.1, toward: 67, amplitude: 0.6, phase: 0.3 }]

/** A swell of 10 s toward 132 degrees with a spread of 10, H_m0 1.2 m, from a fixed row of chances (mulberry32). */
function swell(): Train[] {
  let state = 11
  const next = () => {
    state = (state + 0x6d2b79f5) >>> 0
    let t = Math.imul(state ^ (state >>> 15), state | 1)
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61)
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296 + 1e-12
  }
  const normal = () => Math.sqrt(-2 * Math.log(next())) * Math.cos(2 * Math.PI * next())
  return Array.from({ length: 200 }, (_, n) => ({
    frequency: 0.1 * Math.exp(0.1 * normal()),
    // Headings lie evenly, so that their mean is the one wanted.
    toward: 132 + 35 * (((n + 0.5) * 0.6180339887498949) % 1) - 17.5,
    amplitude: 0.3 * Math.sqrt(2 / 200) * Math.sqrt(-Math.log(next())),
    phase: 2 * Math.PI * next(),
  }))
}

function seaChecks(): SelfCheck[] {
  const one = estimate(windowOf(regular))
  const trains = swell()
  const record = windowOf(trains)
  const sea = estimate(record)
  const turned = estimate(windowOf(trains, 37))
  const speed = (2 * Math.PI * 0.1) / solved(2 * Math.PI * 0.1)
  return [
    check('regular wave: heading off', off(one, 67), 0, 0.1),
    check('regular wave: speed', one.systems[0]?.speed ?? NaN, speed, 0.01),
    check('regular wave: H_m0', one.significantWaveHeight ?? NaN, 4 * Math.sqrt(0.18), 0.05),
    check('swell: heading off', off(sea, 132), 0, 4),
    check('swell: speed over linear theory', (sea.systems[0]?.speed ?? NaN) / speed, 1, 0.03),
    check('swell: H_m0', sea.significantWaveHeight ?? NaN, heightOf(record), 0.03),
    check('swell in turned axes: heading', off(turned, 132 + 37), off(sea, 132), 1e-6),
    check('swell in turned axes: speed', turned.systems[0]?.speed ?? NaN, sea.systems[0]?.speed ?? NaN, 1e-6),
  ]
}

/** 4 standard deviations of the record, mean over the sensors, m. */
const heightOf = ({ series }: ArrayWindow): number =>
  series.reduce((sum, one) => sum + 4 * Math.sqrt(one.reduce((all, v) => all + v * v, 0) / one.length), 0) /
  series.length

const off = ({ systems }: EstimateResult, toward: number): number =>
  systems.length > 0 ? turnBetween(systems[0].toward, toward) : NaN

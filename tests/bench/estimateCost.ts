/**
 * What one estimate costs, as a ratio to the plain Welch cross-spectra of the same window with fft.js in the same run (processor time of
 * this process, so that other work on the machine counts little), and how the cost grows with sensors and with the window.
 * `npm run bench -- --estimate`, with the repeats after it (10).
 */
import FFT from 'fft.js'
import { arrayDirections } from '../../shared/waves/arrayDirections.ts'
import { arraySpectra } from '../../shared/waves/arraySpectra.ts'
import { estimate } from '../../shared/waves/estimate.ts'
import { checkArray, prepareArray } from '../../shared/waves/preparedArray.ts'
import { findRandomSea } from '../../shared/waves/randomSea.ts'
import type { ArrayWindow } from '../../shared/waves/window.ts'
import { seededSea } from './seededSea.ts'
import type { SeededTrain } from './seededSea.ts'

const swell: SeededTrain = { toward: 34, peakPeriod: 9, height: 1, spread: 14, gamma: 3.3 }
const windSea: SeededTrain = { toward: 100, peakPeriod: 5, height: 0.8, spread: 27, gamma: 2 }

/** An uneven disc of sensors, about 40 m across (golden angle). */
const disc = (sensors: number) =>
  Array.from({ length: sensors }, (_, n) => {
    const radius = 20 * Math.sqrt((n + 0.5) / sensors)
    return { east: radius * Math.cos(2.39996 * n), north: radius * Math.sin(2.39996 * n) }
  })

const windowOf = (seed: number, sensors: number, minutes: number, trains: SeededTrain[]): ArrayWindow =>
  seededSea({ seed, trains, depth: 12, positions: disc(sensors), sampleRate: 4, seconds: 60 * minutes, noise: 0.02 })

/** Segments of 128 s, Hann taper, half overlap: densities and cross-spectra of all pairs, nothing else. */
function plainCrossSpectra({ series, sampleRate }: ArrayWindow): Float64Array[] {
  const length = 128 * sampleRate
  const fft = new FFT(length)
  const taper = Float64Array.from({ length }, (_, i) => 0.5 - 0.5 * Math.cos((2 * Math.PI * i) / length))
  const input = new Float64Array(length)
  const parts = series.map(() => new Float64Array(2 * length))
  const pairs = series.flatMap((_, i) => series.slice(i).map(() => new Float64Array(length + 2)))
  for (let start = 0; start + length <= series[0].length; start += length / 2) {
    series.forEach((one, m) => {
      let mean = 0
      for (let i = 0; i < length; i++) mean += one[start + i] / length
      for (let i = 0; i < length; i++) input[i] = (one[start + i] - mean) * taper[i]
      fft.realTransform(parts[m], input)
    })
    let pair = 0
    for (let i = 0; i < series.length; i++) {
      for (let j = i; j < series.length; j++) {
        const sum = pairs[pair++]
        for (let n = 0; n < length + 2; n += 2) {
          sum[n] += parts[i][n] * parts[j][n] + parts[i][n + 1] * parts[j][n + 1]
          sum[n + 1] += parts[i][n] * parts[j][n + 1] - parts[i][n + 1] * parts[j][n]
        }
      }
    }
  }
  return pairs
}

/** Median processor time of one call over several windows, ms, after each has been worked once. */
function costOf<T>(subjects: readonly T[], repeats: number, work: (subject: T) => unknown): number {
  for (const subject of subjects) work(subject)
  const costs: number[] = []
  for (let n = 0; n < repeats; n++) {
    for (const subject of subjects) {
      const before = process.cpuUsage()
      work(subject)
      const { user, system } = process.cpuUsage(before)
      costs.push((user + system) / 1000)
    }
  }
  return costs.sort((a, b) => a - b)[Math.floor(costs.length / 2)]
}

export function benchEstimateCost(repeats: number, say: (line: string) => void): void {
  const seeds = [1, 2, 3]
  const one = seeds.map((seed) => windowOf(seed, 5, 20, [swell]))
  const two = seeds.map((seed) => windowOf(seed, 5, 20, [swell, windSea]))
  const many = (windows: readonly ArrayWindow[]) => costOf(windows, repeats, (window) => estimate(window))
  // Twenty at once, because one is near the grain of the clock.
  const plain = costOf(one, repeats, (window) => Array.from({ length: 20 }, () => plainCrossSpectra(window)[0][2])) / 20
  const tell = (what: string, cost: number) =>
    say(`${what.padEnd(56)} ${cost.toFixed(2).padStart(9)} ms ${(cost / plain).toFixed(1).padStart(7)} times`)
  say(`median processor time of ${3 * repeats} windows; 5 sensors, 4 Hz, 20 min unless said`)
  tell('plain Welch cross-spectra (fft.js, 128 s, Hann, half overlap)', plain)
  tell('whole estimate, one train', many(one))
  tell('whole estimate, two trains', many(two))
  tell(
    '  checks of the samples',
    costOf(one, repeats, (window) => checkArray(window)),
  )
  const prepared = one.map((window) => ({ window, array: prepareArray(window, checkArray(window)) }))
  tell(
    '  spectra and matrices',
    costOf(prepared, repeats, ({ window, array }) => arraySpectra(window, array)),
  )
  const seas = prepared.flatMap(({ window, array }) => {
    const spectra = arraySpectra(window, array)
    return spectra ? [{ window, array, spectra }] : []
  })
  tell(
    '  trains by maximum likelihood, with their errors',
    costOf(seas, repeats, ({ window, array, spectra }) =>
      findRandomSea(spectra, array.frame, window.waterDepth, window.settings.gravity),
    ),
  )
  tell(
    '  directional spectrum by IMLM',
    costOf(seas, repeats, ({ window, array, spectra }) =>
      arrayDirections(spectra, array.frame, window.waterDepth, window.settings.gravity),
    ),
  )
  growth('sensors', [3, 4, 5, 6, 8, 10, 12], (sensors) => many([windowOf(4, sensors, 20, [swell])]), say)
  growth('minutes', [10, 20, 30, 40, 60], (minutes) => many([windowOf(4, 5, minutes, [swell])]), say)
}

/** Costs at several sizes and the exponent of the power law that fits them best. */
function growth(
  what: string,
  sizes: readonly number[],
  costAt: (size: number) => number,
  say: (line: string) => void,
): void {
  const costs = sizes.map(costAt)
  const x = sizes.map(Math.log)
  const y = costs.map(Math.log)
  const mean = (values: number[]) => values.reduce((sum, v) => sum + v, 0) / values.length
  const slope =
    mean(x.map((v, n) => (v - mean(x)) * (y[n] - mean(y)))) / mean(x.map((v) => (v - mean(x)) * (v - mean(x))))
  say(
    `${what}: ${sizes.map((size, n) => `${size}: ${costs[n].toFixed(1)} ms`).join(', ')}; grows as ${what}^${slope.toFixed(2)}`,
  )
}

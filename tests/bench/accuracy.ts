/**
 * How far off the estimator is, and how honest its ±, on seeded seas with many directions at every frequency: bias, rmse, rmse over the
 * Cramér-Rao bound, coverage of ± at one and two standard deviations, healthy sensors accused. Run by `npm run bench -- --accuracy`,
 * with the number of seas of each kind after it (12).
 */
import { turnBetween } from '../../shared/directions.ts'
import { estimate } from '../../shared/waves/estimate.ts'
import { cramerRaoBound } from './cramerRao.ts'
import { jonswapDensity, linearWaveNumber, seededDice, seededSea } from './seededSea.ts'
import type { SeaRecipe } from './seededSea.ts'

const layouts = [
  [-14, -9],
  [13, -12],
  [-2, 19],
  [3, 1],
  [21, 9],
  [-8, 7],
].map(([east, north]) => ({ east, north }))

export interface SeaError {
  sensors: number
  crest: 'long' | 'short'
  decibels: number
  /** null where no vector was given. */
  vector: {
    heading: number
    headingSd: number
    headingBound: number
    /** Per cent. */
    speed: number
    speedSd: number
    speedBound: number
    trains: number
  } | null
  accused: boolean
  found: boolean
}

function recipeOf(seed: number, sensors: number, crest: 'long' | 'short', decibels: number): SeaRecipe {
  const next = seededDice(seed)
  const height = 0.6 + 1.4 * next()
  return {
    seed: seed + 7919,
    trains: [
      {
        toward: 360 * next(),
        peakPeriod: 6 + 7 * next(),
        height,
        spread: crest === 'long' ? 6 + 8 * next() : 20 + 12 * next(),
        gamma: next() < 0.5 ? 1.5 : 3.3,
      },
    ],
    depth: 8 + 10 * next(),
    positions: layouts.slice(0, sensors),
    sampleRate: 2,
    seconds: 1200,
    noise: (height / 4) * 10 ** (-decibels / 20),
  }
}

function errorOf(seed: number, sensors: number, crest: 'long' | 'short', decibels: number): SeaError {
  const recipe = recipeOf(seed, sensors, crest, decibels)
  const [train] = recipe.trains
  const window = seededSea(recipe)
  const result = estimate(window)
  const wrong = result.sensors.map((s) => s.findings.includes('clock') || s.findings.includes('position') || !s.used)
  const accused = wrong.includes(true) || result.reason === 'geometry-doubtful'
  const found = result.sensors.some((s) => s.findings.length > 0)
  const kind = { sensors, crest, decibels, accused, found }
  const system = result.systems.at(0)
  if (!system) return { ...kind, vector: null }
  const peak = 1 / train.peakPeriod
  const bound = cramerRaoBound({
    ...recipe,
    toward: train.toward,
    spread: train.spread,
    density: jonswapDensity(train),
    noise: (2 * recipe.noise ** 2) / recipe.sampleRate,
    from: 0.7 * peak,
    to: 1.9 * peak,
  })
  // Held against theory at the estimate's own period, so that the sampling error of the period is not counted.
  const omega = (2 * Math.PI) / system.peakPeriod
  const theory = omega / linearWaveNumber(omega, recipe.depth)
  return {
    ...kind,
    vector: {
      heading: turnBetween(train.toward, system.toward),
      headingSd: system.headingSd,
      headingBound: bound.heading,
      speed: 100 * (system.speed / theory - 1),
      speedSd: (100 * system.speedSd) / theory,
      speedBound: 100 * bound.logSpeed,
      trains: result.systems.length,
    },
  }
}

export function* seaErrors(each: number): Generator<SeaError> {
  let seed = 1
  for (const sensors of [3, 4, 5, 6])
    for (const crest of ['long', 'short'] as const)
      for (const decibels of [20, 10, 3]) for (let n = 0; n < each; n++) yield errorOf(seed++, sensors, crest, decibels)
}

const mean = (values: number[]) => values.reduce((sum, v) => sum + v, 0) / Math.max(1, values.length)
const rms = (values: number[]) => Math.sqrt(mean(values.map((v) => v * v)))
const share = (values: boolean[]) => (100 * values.filter(Boolean).length) / Math.max(1, values.length)

export function row(name: string, errors: readonly SeaError[]): string {
  const v = errors.flatMap(({ vector }) => vector ?? [])
  const of = (
    error: (one: (typeof v)[number]) => number,
    sd: (one: (typeof v)[number]) => number,
    bound: (one: (typeof v)[number]) => number,
  ) => [
    mean(v.map(error)).toFixed(2),
    rms(v.map(error)).toFixed(2),
    rms(v.map((one) => error(one) / bound(one))).toFixed(2),
    share(v.map((one) => Math.abs(error(one)) <= sd(one))).toFixed(0),
    share(v.map((one) => Math.abs(error(one)) <= 2 * sd(one))).toFixed(0),
  ]
  return [
    name.padEnd(24),
    ...[String(errors.length), String(errors.length - v.length), String(v.filter((one) => one.trains > 1).length)],
    ...of(
      (one) => one.heading,
      (one) => one.headingSd,
      (one) => one.headingBound,
    ),
    ...of(
      (one) => one.speed,
      (one) => one.speedSd,
      (one) => one.speedBound,
    ),
    share(errors.map((one) => one.accused)).toFixed(1),
    share(errors.map((one) => one.found)).toFixed(1),
  ]
    .map((cell) => cell.padStart(7))
    .join('')
}

export function benchAccuracy(each: number, say: (line: string) => void): void {
  const all = [...seaErrors(each)]
  say(
    '                        | seas, no vector, several | heading °: bias rmse /bound 1sd% 2sd% | speed %: the same | accused % found %',
  )
  const part = (name: string, keep: (one: SeaError) => boolean) => say(row(name, all.filter(keep)))
  for (const sensors of [3, 4, 5, 6]) part(`${sensors} sensors`, (one) => one.sensors === sensors)
  for (const crest of ['long', 'short'] as const) part(`${crest}-crested`, (one) => one.crest === crest)
  for (const decibels of [20, 10, 3]) part(`${decibels} dB`, (one) => one.decibels === decibels)
  for (const sensors of [3, 4, 5, 6])
    for (const crest of ['long', 'short'] as const)
      for (const decibels of [20, 10, 3])
        part(
          `  ${sensors} ${crest} ${decibels} dB`,
          (one) => one.sensors === sensors && one.crest === crest && one.decibels === decibels,
        )
  part('all', () => true)
}

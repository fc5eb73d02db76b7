/**
 * How far off the estimator is, and how honest its ±, on seeded seas with many directions at every frequency: bias, rmse, rmse over the
 * Cramér-Rao bound, coverage of ± at one and two standard deviations, healthy sensors accused. Run by `npm run bench -- --accuracy`,
 * with the number of seas an array after it (200) and the first seed after that (300001).
 */
import { arrays, crests, disturbances, disturbedErrors, ratios, seaErrors } from './accuracySeas.ts'
import type { SeaError } from './accuracySeas.ts'
import { seededDice } from './seededSea.ts'

type Vector = NonNullable<SeaError['vector']>

const mean = (values: number[]) => values.reduce((sum, v) => sum + v, 0) / Math.max(1, values.length)
const rms = (values: number[]) => Math.sqrt(mean(values.map((v) => v * v)))
const share = (values: boolean[]) => (100 * values.filter(Boolean).length) / Math.max(1, values.length)

/** Seas drawn again for the range of a figure (Efron 1979). */
const resamples = 1000

/** 95 % range of a figure over the seas it was taken from: percentiles of the same figure over as many seas drawn with return. */
function rangeOf(vectors: readonly Vector[], figure: (drawn: Vector[]) => number): string {
  const next = seededDice(vectors.length)
  const figures = Array.from({ length: resamples }, () =>
    figure(Array.from(vectors, () => vectors[Math.floor(next() * vectors.length)])),
  ).sort((a, b) => a - b)
  return `${figures[Math.round(0.025 * resamples)].toFixed(2)}-${figures[Math.round(0.975 * resamples) - 1].toFixed(2)}`
}

const headingRatio = (v: Vector[]) => rms(v.map((one) => one.heading / one.headingBound))
const headingError = (v: Vector[]) => rms(v.map((one) => one.heading))
const speedError = (v: Vector[]) => rms(v.map((one) => one.speed))
const speedRatio = (v: Vector[]) => rms(v.map((one) => one.speed / one.speedBound))

const columns = [
  ['seas', 6],
  ['none', 6],
  ['2+', 5],
  ['bias °', 8],
  ['rmse °', 8],
  ['/bound', 8],
  ['95 % range', 12],
  ['1 sd %', 8],
  ['2 sd %', 8],
  ['bias %', 8],
  ['rmse %', 8],
  ['95 % range', 12],
  ['/bound', 8],
  ['1 sd %', 8],
  ['2 sd %', 8],
  ['accused', 9],
] as const

const nameWidth = 30
const line = (name: string, cells: readonly string[]) =>
  name.padEnd(nameWidth) + cells.map((cell, n) => cell.padStart(columns[n][1])).join('')

function row(name: string, errors: readonly SeaError[]): string {
  const v = errors.flatMap(({ vector }) => vector ?? [])
  const counts = [errors.length, errors.length - v.length, v.filter((one) => one.trains > 1).length].map(String)
  if (v.length === 0) return line(name, counts)
  const covered = (error: 'heading' | 'speed', sd: 'headingSd' | 'speedSd', times: number) =>
    share(v.map((one) => Math.abs(one[error]) <= times * one[sd])).toFixed(0)
  return line(name, [
    ...counts,
    mean(v.map((one) => one.heading)).toFixed(2),
    headingError(v).toFixed(2),
    headingRatio(v).toFixed(2),
    rangeOf(v, headingRatio),
    covered('heading', 'headingSd', 1),
    covered('heading', 'headingSd', 2),
    mean(v.map((one) => one.speed)).toFixed(2),
    speedError(v).toFixed(2),
    rangeOf(v, speedError),
    speedRatio(v).toFixed(2),
    covered('speed', 'speedSd', 1),
    covered('speed', 'speedSd', 2),
    String(errors.filter((one) => one.accused).length),
  ])
}

export function benchAccuracy(each: number, firstSeed: number, say: (line: string) => void): void {
  say(
    `${each} seas an array from seed ${firstSeed}; 20 min at 2 Hz; peak 6 to 13 s, height 0.6 to 2 m, depth 8 to 18 m,`,
  )
  say(
    'any heading; JONSWAP with gamma 1.5 or 3.3; cos^2s with a spread of 6 to 14° (long crests) or 20 to 32° (short);',
  )
  say(`white noise 20, 10 or 3 dB below the sea; ranges from ${resamples} seeded resamples. First heading, then speed.`)
  say(
    line(
      '',
      columns.map(([name]) => name),
    ),
  )
  const all: SeaError[] = []
  for (const error of seaErrors(each, firstSeed)) all.push(error)
  const part = (name: string, keep: (one: SeaError) => boolean) => say(row(name, all.filter(keep)))
  for (const array of Object.keys(arrays)) part(array, (one) => one.array === array)
  for (const crest of crests) part(`${crest}-crested`, (one) => one.crest === crest)
  for (const decibels of ratios) part(`${decibels} dB`, (one) => one.decibels === decibels)
  for (const sensors of [...new Set(all.map((one) => one.sensors))])
    for (const crest of crests)
      for (const decibels of ratios)
        part(
          `  ${sensors} sensors, ${crest}, ${decibels} dB`,
          (one) => one.sensors === sensors && one.crest === crest && one.decibels === decibels,
        )
  part('all', () => true)
  const accused = all.filter((one) => one.accused).length
  say(`healthy sensors accused in ${accused} of ${all.length} windows; other findings (spikes, rates) in`)
  say(`${all.filter((one) => one.found).length} windows`)
  const fewer = Math.max(6, Math.round(each / 5))
  say(`what linear theory does not know of, five sensors, ${fewer} seas each:`)
  Object.keys(disturbances).forEach((disturbance, n) =>
    say(row(disturbance, disturbedErrors(disturbance, 'five, uneven', fewer, firstSeed + 100_000 + 1000 * n))),
  )
}

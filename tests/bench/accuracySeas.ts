/** The seas and arrays that the estimator's accuracy is measured on, and how far off each answer is. */
import { turnBetween } from '../../shared/directions.ts'
import { estimate } from '../../shared/waves/estimate.ts'
import { cramerRaoBound } from './cramerRao.ts'
import { jonswapDensity, seededDice, seededSea, wavenumberOnCurrent } from './seededSea.ts'
import type { SeaRecipe } from './seededSea.ts'

type Place = [east: number, north: number]

/** Metres. Regular and irregular, compact and wide. */
export const arrays: Record<string, readonly Place[]> = {
  'three, right angle': [
    [0, 0],
    [18, 0],
    [0, 18],
  ],
  'three, uneven': [
    [-14, -9],
    [13, -12],
    [-2, 19],
  ],
  'four, uneven': [
    [-14, -9],
    [13, -12],
    [-2, 19],
    [3, 1],
  ],
  'five, square and centre': [
    [-12, -12],
    [12, -12],
    [12, 12],
    [-12, 12],
    [0, 0],
  ],
  'five, uneven': [
    [-14, -9],
    [13, -12],
    [-2, 19],
    [3, 1],
    [21, 9],
  ],
  'six, uneven': [
    [-14, -9],
    [13, -12],
    [-2, 19],
    [3, 1],
    [21, 9],
    [-8, 7],
  ],
}

export const crests = ['long', 'short'] as const
export const ratios = [20, 10, 3] as const

export interface SeaKind {
  array: string
  crest: (typeof crests)[number]
  /** Signal over noise, dB. */
  decibels: (typeof ratios)[number]
}

export interface SeaError extends SeaKind {
  sensors: number
  /** null where no vector was given. */
  vector: {
    /** Degrees: error, its ± and the Cramér-Rao bound. */
    heading: number
    headingSd: number
    headingBound: number
    /** Per cent. */
    speed: number
    speedSd: number
    speedBound: number
    trains: number
  } | null
  /** A sensor was left out or its clock or position doubted, though all are healthy. */
  accused: boolean
  found: boolean
}

/** Peak period 6 to 13 s, height 0.6 to 2 m, depth 8 to 18 m, any heading, spread 6 to 14° or 20 to 32°. */
export function recipeOf(seed: number, { array, crest, decibels }: SeaKind): SeaRecipe {
  const next = seededDice(seed)
  const height = 0.6 + 1.4 * next()
  const train = {
    toward: 360 * next(),
    peakPeriod: 6 + 7 * next(),
    height,
    spread: crest === 'long' ? 6 + 8 * next() : 20 + 12 * next(),
    gamma: next() < 0.5 ? 1.5 : 3.3,
  }
  return {
    seed: seed + 7919,
    trains: [train],
    depth: 8 + 10 * next(),
    positions: arrays[array].map(([east, north]) => ({ east, north })),
    sampleRate: 2,
    seconds: 1200,
    noise: (height / 4) * 10 ** (-decibels / 20),
  }
}

export function errorOf(recipe: SeaRecipe, kind: SeaKind): SeaError {
  const [train] = recipe.trains
  const result = estimate(seededSea(recipe))
  const doubted = result.sensors.some((s) => !s.used || s.findings.includes('clock') || s.findings.includes('position'))
  const told = {
    ...kind,
    sensors: recipe.positions.length,
    accused: doubted || result.reason === 'geometry-doubtful',
    found: result.sensors.some((s) => s.findings.length > 0),
  }
  const system = result.systems.at(0)
  if (!system) return { ...told, vector: null }
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
  const theory = omega / wavenumberOnCurrent(omega, recipe.depth, recipe.current?.along ?? 0)
  return {
    ...told,
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

/** What linear theory at the stated depth does not know of. */
export const disturbances: Record<string, (recipe: SeaRecipe) => SeaRecipe> = {
  'current along, 0.8 m/s': (recipe) => ({ ...recipe, current: { along: 0.8, across: 0 } }),
  'current against, 0.8 m/s': (recipe) => ({ ...recipe, current: { along: -0.8, across: 0 } }),
  'current across, 0.8 m/s': (recipe) => ({ ...recipe, current: { along: 0, across: 0.8 } }),
  'depth stated 25 % too great': (recipe) => ({ ...recipe, statedDepth: 1.25 * recipe.depth }),
  'depth stated 20 % too small': (recipe) => ({ ...recipe, statedDepth: 0.8 * recipe.depth }),
}

/** `each` disturbed seas of an array. */
export function disturbedErrors(disturbance: string, array: string, each: number, firstSeed: number): SeaError[] {
  return Array.from({ length: each }, (_, n) => {
    const kind = { array, crest: crests[n % 2], decibels: ratios[Math.floor(n / 2) % 3] }
    const recipe = recipeOf(firstSeed + n, kind)
    return errorOf({ ...recipe, ...disturbances[disturbance](recipe) }, kind)
  })
}

/** `each` seas an array, crests and ratios of signal to noise in turn. */
export function* seaErrors(each: number, firstSeed: number): Generator<SeaError> {
  let seed = firstSeed
  for (const array of Object.keys(arrays)) {
    for (let n = 0; n < each; n++) {
      const kind = { array, crest: crests[n % 2], decibels: ratios[Math.floor(n / 2) % 3] }
      yield errorOf(recipeOf(seed++, kind), kind)
    }
  }
}

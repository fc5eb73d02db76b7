/** Seas for the tests of places: angles in degrees true, as people give them. */
import { radiansFromEast } from '../../../shared/directions.ts'
import type { DirectionalDensity, Sea, SeaSystem } from '../../../shared/hazards/sea.ts'

export const degree = Math.PI / 180

export interface TrueSystem {
  key?: number
  name?: string
  height: number
  heightSd?: number | null
  period: number
  toward: number
  headingSd?: number
  spread?: number | null
}

export function system(given: TrueSystem): SeaSystem {
  const { key = 1, name = 'swell', height, heightSd = 0.05, period, toward, headingSd = 2, spread = 15 } = given
  return {
    key,
    name,
    height: { value: height, sd: heightSd },
    period: { value: period, sd: 0.03 * period },
    heading: { value: radiansFromEast(toward), sd: headingSd * degree },
    spread: spread === null ? null : spread * degree,
    band: { from: 0.75 / period, to: 1.35 / period },
  }
}

export function sea(systems: SeaSystem[], over: Partial<Sea> = {}): Sea {
  const height = Math.sqrt(systems.reduce((sum, one) => sum + one.height.value ** 2, 0))
  const leading = systems.at(0)
  const period = leading ? leading.period : null
  return {
    height: { value: height, sd: 0.05 * height },
    ...{ peakPeriod: period, meanPeriod: period, energyPeriod: period },
    systems,
    directional: null,
    depth: 11.6,
    ...over,
  }
}

/** Fairway's sea of the pictures: swell and wind sea. */
export const fairwaySystems: TrueSystem[] = [
  { key: 1, name: 'swell', height: 1.9, period: 12.5, toward: 61, spread: 13 },
  { key: 3, name: 'wind sea', height: 0.9, period: 5.6, toward: 108, spread: 35 },
]

/** JONSWAP shapes (γ 3.3) with cos²ˢ spreading on 5° by 0.005 Hz, scaled to the heights. */
export function directionalDensity(systems: TrueSystem[]): DirectionalDensity {
  const frequency = Array.from({ length: 95 }, (_, n) => 0.03 + 0.005 * n)
  const heading = Array.from({ length: 72 }, (_, n) => radiansFromEast(5 * n))
  const density = frequency.map(() => heading.map(() => 0))
  for (const { height, period, toward, spread } of systems) {
    const s = 2 / ((spread ?? 15) * degree) ** 2 - 1
    const shape = frequency.map((f) => {
      const width = f * period <= 1 ? 0.07 : 0.09
      return (
        f ** -5 * Math.exp(-1.25 * (f * period) ** -4) * 3.3 ** Math.exp(-((f * period - 1) ** 2) / (2 * width * width))
      )
    })
    const spreading = heading.map((one) => Math.abs(Math.cos((one - radiansFromEast(toward)) / 2)) ** (2 * s))
    const sum = shape.reduce((all, one) => all + one, 0) * 0.005
    const around = spreading.reduce((all, one) => all + one, 0) * 5 * degree
    shape.forEach((value, row) =>
      spreading.forEach((share, column) => {
        density[row][column] += ((height / 4) ** 2 * value * share) / (sum * around)
      }),
    )
  }
  return { method: 'IMLM', converged: true, frequency, heading, density }
}

/** Beam power over the slowness plane as filled runs, one path a step of power. */
import { round2 } from './polar.ts'

/** Powers at which the next tone begins; below the first nothing is drawn. */
export const powerSteps = [0.1, 0.2, 0.35, 0.5, 0.7, 0.85] as const

/** 0 below the first step, then 1 to 6. */
export const powerTone = (power: number): number => powerSteps.filter((step) => power >= step).length

/**
 * `power[row][column]`, rows from north to south, columns from west to east, drawn in a square of the given size.
 * The answer has one path for each of the six tones, lightest first; cells overlap by a hair so that no seam shows.
 */
export function beamCells(power: readonly (readonly number[])[], size: number): string[] {
  const paths = powerSteps.map(() => '')
  const cell = size / Math.max(1, power.length)
  power.forEach((row, j) => {
    let start = 0
    row.forEach((value, i) => {
      const tone = powerTone(value)
      if (i + 1 < row.length && powerTone(row[i + 1]) === tone) return
      if (tone > 0) {
        const width = round2((i + 1 - start) * cell)
        paths[tone - 1] += `M${round2(start * cell)} ${round2(j * cell)}h${width}v${round2(cell + 0.2)}h-${width}z`
      }
      start = i + 1
    })
  })
  return paths
}

/** Beam power over the slowness plane as filled runs, one path a step of power. */
import { round2 } from './polar.ts'

/** Powers at which the next tone begins; below the first nothing is drawn. */
export const powerSteps = [0.1, 0.2, 0.35, 0.5, 0.7, 0.85] as const

/** 0 below the first step, then 1 to 6. */
export const powerTone = (power: number): number => powerSteps.filter((step) => power >= step).length

/**
 * `power[row × cells + column]`, rows from north to south, columns from west to east, drawn in a square of the given
 * size. The answer has one path for each of the six tones, lightest first; cells overlap by a hair so that no seam shows.
 */
export function beamCells(power: ArrayLike<number>, cells: number, size: number): string[] {
  const paths = powerSteps.map(() => '')
  const cell = size / Math.max(1, cells)
  for (let row = 0; row < cells; row += 1) {
    let start = 0
    for (let column = 0; column < cells; column += 1) {
      const tone = powerTone(power[row * cells + column])
      if (column + 1 < cells && powerTone(power[row * cells + column + 1]) === tone) continue
      if (tone > 0) {
        const width = round2((column + 1 - start) * cell)
        paths[tone - 1] += `M${round2(start * cell)} ${round2(row * cell)}h${width}v${round2(cell + 0.2)}h-${width}z`
      }
      start = column + 1
    }
  }
  return paths
}

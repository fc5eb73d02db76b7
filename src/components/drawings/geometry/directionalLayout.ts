/** Cells of a directional spectrum on a disc: from bearing around, frequency outward, power in the six steps of the tone. */
import { opposite } from '../../../../shared/directions.ts'
import { polar, polyline } from './polar.ts'
import type { Point } from './polar.ts'

/** Share of the highest density from which each step begins; below the first nothing is drawn. */
export const powerSteps = [0.1, 0.2, 0.35, 0.5, 0.7, 0.85]

/** Step 1 to 6 of a share of the highest density; 0 below the first. */
export const powerStep = (share: number): number => powerSteps.filter((from) => share >= from).length

export interface DirectionalDensity {
  /** Hz, rising. */
  frequency: readonly number[]
  /** Toward, degrees true, evenly around. */
  directions: readonly number[]
  /** Row by frequency; any unit, for shares of the highest are drawn. */
  density: readonly (readonly number[])[]
}

/** Borders of the rings, Hz: half way between neighbours, the outer ones as far out as their inner borders lie in. */
export function ringBorders(frequency: readonly number[]): number[] {
  if (frequency.length === 1) return [frequency[0] * 0.95, frequency[0] * 1.05]
  const between = frequency.slice(1).map((f, n) => (f + frequency[n]) / 2)
  const last = frequency.length - 1
  return [Math.max(0, 2 * frequency[0] - between[0]), ...between, 2 * frequency[last] - between[between.length - 1]]
}

/** Highest density, and where: frequency in Hz, bearing that the waves come from. Null where all is nothing. */
export function highestPower({ frequency, directions, density }: DirectionalDensity) {
  const all = density.flatMap((row, g) =>
    row.map((value, d) => ({ density: value, frequency: frequency[g], from: opposite(directions[d]) })),
  )
  const best = all.reduce<(typeof all)[number] | null>(
    (top, one) => (one.density > (top?.density ?? 0) ? one : top),
    null,
  )
  return best
}

/** One path a step (index 0 is step 1), of ring pieces about (x, y); `radius` turns Hz into pixels. */
export function stepPaths(found: DirectionalDensity, [x, y]: Point, radius: (frequency: number) => number): string[] {
  const highest = highestPower(found)?.density ?? 0
  const paths = powerSteps.map(() => '')
  if (highest === 0) return paths
  const borders = ringBorders(found.frequency)
  const step = 360 / found.directions.length
  found.density.forEach((row, g) => {
    const steps = row.map((value) => powerStep(value / highest))
    for (const run of runsAround(steps)) {
      if (run.step === 0) continue
      const from = opposite(found.directions[run.first]) - step / 2
      paths[run.step - 1] += ringPiece([x, y], radius(borders[g]), radius(borders[g + 1]), from, run.count * step)
    }
  })
  return paths
}

/** Neighbours of one step put together, so that no seam shows; a run does not go past the first direction. */
function runsAround(steps: readonly number[]): { step: number; first: number; count: number }[] {
  const runs: { step: number; first: number; count: number }[] = []
  steps.forEach((step, index) => {
    const last = runs.at(-1)
    if (last && last.step === step) last.count += 1
    else runs.push({ step, first: index, count: 1 })
  })
  return runs
}

/** Straight pieces of at most three degrees stand for the arcs. */
function ringPiece([x, y]: Point, inner: number, outer: number, from: number, turn: number): string {
  const pieces = Math.max(1, Math.ceil(turn / 3))
  const bearings = Array.from({ length: pieces + 1 }, (_, n) => from + (turn * n) / pieces)
  const out = bearings.map((bearing) => polar(x, y, bearing, outer))
  const back = bearings.map((bearing) => polar(x, y, bearing, inner)).reverse()
  return `${polyline([...out, ...back])}Z`
}

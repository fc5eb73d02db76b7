/** Directions that an array can mistake for one another at a single period, and the period from which none is left. */
import { normalise } from '../directions.ts'
import type { GridPosition } from '../geodesy.ts'
import { waveNumber } from '../waves/dispersion.ts'
import { ringPower } from './beamResponse.ts'

export interface FalsePeak {
  /** s */
  period: number
  /** Degrees true the wave comes from, and where it would be read. */
  from: number
  readsFrom: number
  /** Of the true peak's power, 0 to 1. */
  power: number
}

export interface FalsePeakQuestion {
  waterDepth: number
  gravity: number
  /** s */
  periodFrom: number
  periodTo: number
  /** Degrees true, clockwise from first to second; null: all round. */
  openSeaSector: [number, number] | null
}

/** A runner-up within 15 % of the peak makes a reading ambiguous. */
export const ambiguousPower = 1 / 1.15
const periods = 28

/** Is a direction (degrees true) within a sector given clockwise? */
export function isWithin(direction: number, sector: [number, number] | null): boolean {
  if (!sector) return true
  const width = normalise(sector[1] - sector[0])
  return width === 0 || normalise(direction - sector[0]) <= width
}

/** The highest peak on the ring beside the true one, for the worst of the directions; null where there is no other peak. */
export function worstFalsePeakAt(
  sensors: readonly GridPosition[],
  period: number,
  { waterDepth, gravity, openSeaSector }: FalsePeakQuestion,
  longestBaseline: number,
): FalsePeak | null {
  const ring = waveNumber((2 * Math.PI) / period, waterDepth, gravity)
  const { count, powerAt } = ringPower(sensors, ring, longestBaseline)
  const fromOf = (index: number): number => normalise((360 * index) / count + 180)
  let worst: FalsePeak | null = null
  const row = new Float64Array(count)
  for (let index = 0; index < count; index++) {
    if (!isWithin(fromOf(index), openSeaSector)) continue
    for (let n = 0; n < count; n++) row[n] = powerAt(index, n)
    const peak = highestBeside(row, index)
    if (peak === null || (worst && row[peak] <= worst.power)) continue
    worst = { period, from: fromOf(index), readsFrom: fromOf(peak), power: row[peak] }
  }
  return worst
}

/** Index of the highest local maximum on a ring outside the lobe about `main`; null where there is none. */
function highestBeside(row: Float64Array, main: number): number | null {
  const count = row.length
  let right = 1
  while (right < count && row[(main + right) % count] <= row[(main + right - 1) % count]) right += 1
  let left = 1
  while (left < count && row[(main - left + count) % count] <= row[(main - left + 1 + count) % count]) left += 1
  if (left + right >= count + 1) return null
  let best: number | null = null
  for (let n = right; n <= count - left; n++) {
    const at = (main + n) % count
    if (best === null || row[at] > row[best]) best = at
  }
  return best
}

/** Periods from longest to shortest, evenly by their logarithm. */
const sweepOf = ({ periodFrom, periodTo }: FalsePeakQuestion): number[] =>
  Array.from({ length: periods }, (_, n) => periodTo * (periodFrom / periodTo) ** (n / (periods - 1)))

export interface FalsePeakSweep {
  worst: FalsePeak | null
  /** From here up every direction is unambiguous, s; null where even the longest period of the range is not. */
  aliasFreePeriod: number | null
}

/** Errors: RangeError for a depth, gravity or period that is not above zero. */
export function sweepFalsePeaks(sensors: readonly GridPosition[], question: FalsePeakQuestion): FalsePeakSweep {
  let worst: FalsePeak | null = null
  let free: number | null = null
  let isFree = true
  const longest = baselines(sensors).longest
  for (const period of sweepOf(question)) {
    const peak = worstFalsePeakAt(sensors, period, question, longest)
    if (peak && (!worst || peak.power > worst.power)) worst = peak
    if (peak && peak.power >= ambiguousPower) isFree = false
    if (isFree) free = period
  }
  return { worst, aliasFreePeriod: free }
}

/** Longest and shortest distance between two sensors, m; 0 for fewer than two. */
export function baselines(sensors: readonly GridPosition[]): { longest: number; shortest: number } {
  let longest = 0
  let shortest = Infinity
  sensors.forEach((a, n) => {
    for (const b of sensors.slice(n + 1)) {
      const distance = Math.hypot(a.east - b.east, a.north - b.north)
      longest = Math.max(longest, distance)
      shortest = Math.min(shortest, distance)
    }
  })
  return { longest, shortest: Number.isFinite(shortest) ? shortest : 0 }
}

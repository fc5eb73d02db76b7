/** One comparison against one reading. Numbers in, a verdict out: the live judgement and the back-test share it. */
import { normalise } from '../directions.ts'
import type { Comparison } from '../schemas/limit.ts'

/** Raise and clear are evidence; hold is the dead-band between them; unknown proves nothing. */
export type Verdict = 'raise' | 'hold' | 'clear' | 'unknown'

/** Without a known sd there is no margin to add. */
const marginOf = (sd: number, sigmas: number): number => (Number.isNaN(sd) ? 0 : sigmas * sd)

/** Outside the sector by how much, degrees; 0 inside. Bearings from, clockwise from the first to the second. */
export function degreesOutside(bearing: number, from: number, to: number): number {
  const width = normalise(to - from)
  const into = normalise(bearing - from)
  return into <= width ? 0 : Math.min(into - width, 360 - into)
}

/**
 * Raises on the value beyond its line, clears only when the value with its margin has come back to the line that clears,
 * so that a count of sensors which is whole again clears where both lines are the same. NaN in `value`: not there, and then
 * `atMost` may still prove that it is clear.
 */
export function judgeComparison(
  comparison: Comparison,
  value: number,
  sd: number,
  atMost: number,
  clearSigmas: number,
): Verdict {
  const margin = marginOf(sd, clearSigmas)
  if (comparison.kind === 'sector') {
    if (Number.isNaN(value)) return 'unknown'
    const outside = degreesOutside(value, comparison.from, comparison.to)
    if (outside === 0) return 'raise'
    return outside - margin > comparison.deadBand ? 'clear' : 'hold'
  }
  if (comparison.kind === 'below') {
    if (Number.isNaN(value)) return 'unknown'
    if (value < comparison.raise) return 'raise'
    return value - margin >= comparison.clear ? 'clear' : 'hold'
  }
  if (Number.isNaN(value)) return atMost + margin <= comparison.clear ? 'clear' : 'unknown'
  if (value > comparison.raise) return 'raise'
  return value + margin <= comparison.clear ? 'clear' : 'hold'
}

/** All together: one that is clear clears, one unknown leaves it open, all that raise raise. */
export function joinVerdicts(joined: Verdict, next: Verdict): Verdict {
  if (joined === 'clear' || next === 'clear') return 'clear'
  if (joined === 'unknown' || next === 'unknown') return 'unknown'
  return joined === 'hold' || next === 'hold' ? 'hold' : 'raise'
}

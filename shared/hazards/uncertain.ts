/**
 * How ± of the inputs becomes ± of a figure: each input alone is moved one standard deviation up and down, half the difference is its
 * part, and independent parts add in quadrature (first order, JCGM 100:2008 §5.1.2, with differences for derivatives as in its note 2 to
 * 5.1.3). Nothing is drawn by lot, so the same inputs give the same ±.
 */

/** A value with one standard deviation; `sd` null where it is not known. */
export interface Uncertain {
  value: number
  sd: number | null
}

export const exactly = (value: number): Uncertain => ({ value, sd: 0 })

/**
 * One standard deviation of `compute`; null where an input's is not known or the figure cannot be determined beside the inputs' values.
 * Where only one side can be computed (an edge of the method's domain) the difference to the middle stands for both.
 */
export function propagate(inputs: readonly Uncertain[], compute: (values: number[]) => number | null): number | null {
  const middle = inputs.map(({ value }) => value)
  const centre = compute(middle)
  if (centre === null || !Number.isFinite(centre)) return null
  let variance = 0
  for (let index = 0; index < inputs.length; index++) {
    const { value, sd } = inputs[index]
    if (sd === null) return null
    if (sd === 0) continue
    const at = (moved: number): number | null => {
      const answer = compute(middle.map((one, place) => (place === index ? moved : one)))
      return answer === null || !Number.isFinite(answer) ? null : answer
    }
    const above = at(value + sd)
    const below = at(value - sd)
    if (above === null && below === null) return null
    const part = above === null || below === null ? (above ?? centre) - (below ?? centre) : (above - below) / 2
    variance += part * part
  }
  return Math.sqrt(variance)
}

/** Independent standard deviations together; null where one is not known. */
export function together(...sds: (number | null)[]): number | null {
  let variance = 0
  for (const sd of sds) {
    if (sd === null) return null
    variance += sd * sd
  }
  return Math.sqrt(variance)
}

/** The largest and the smallest of several rules about the same figure. Errors: RangeError for an empty list. */
export function spreadOf(values: readonly number[]): { from: number; to: number } {
  if (values.length === 0) throw new RangeError('no rule to compare')
  return { from: Math.min(...values), to: Math.max(...values) }
}

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
  return propagateAll(inputs, (values) => [compute(values)])[0]
}

/** The same for several figures of one computation, each by itself. */
export function propagateAll(
  inputs: readonly Uncertain[],
  compute: (values: number[]) => (number | null)[],
): (number | null)[] {
  const middle = inputs.map(({ value }) => value)
  const centre = compute(middle)
  const variances: (number | null)[] = centre.map((value) => (isNumber(value) ? 0 : null))
  inputs.forEach(({ value, sd }, index) => {
    if (sd === null) variances.fill(null)
    if (sd === null || sd === 0) return
    const moved = (by: number): (number | null)[] =>
      compute(middle.map((one, place) => (place === index ? value + by : one)))
    const [above, below] = [moved(sd), moved(-sd)]
    variances.forEach((variance, which) => {
      const part = partOf(above[which], below[which], centre[which])
      variances[which] = variance === null || part === null ? null : variance + part * part
    })
  })
  return variances.map((variance) => (variance === null ? null : Math.sqrt(variance)))
}

const isNumber = (value: number | null): value is number => value !== null && Number.isFinite(value)

function partOf(above: number | null, below: number | null, centre: number | null): number | null {
  if (isNumber(above) && isNumber(below)) return (above - below) / 2
  if (!isNumber(centre)) return null
  if (isNumber(above)) return above - centre
  return isNumber(below) ? centre - below : null
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

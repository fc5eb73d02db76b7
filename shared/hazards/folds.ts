/**
 * Cross-validation in time: the observations, oldest first, are cut into stretches; each stretch is predicted by a fit that has not seen
 * it. Stretches, not lots, because neighbours in time are alike and would vouch for each other.
 */

/** Stretches of as even a length as can be, the longer ones first. */
export function stretches(count: number, parts: number): { from: number; to: number }[] {
  const short = Math.floor(count / parts)
  const longer = count % parts
  let from = 0
  return Array.from({ length: parts }, (_, n) => {
    const to = from + short + (n < longer ? 1 : 0)
    const stretch = { from, to }
    from = to
    return stretch
  })
}

/** For each stretch what `fit` of the others predicts there; null where one of the fits is refused. */
export function predictUnseen<T>(
  rows: readonly T[],
  parts: number,
  fit: (seen: T[]) => ((row: T) => number) | null,
): number[] | null {
  const predicted: number[] = []
  for (const { from, to } of stretches(rows.length, parts)) {
    const predict = fit([...rows.slice(0, from), ...rows.slice(to)])
    if (!predict) return null
    for (const row of rows.slice(from, to)) predicted.push(predict(row))
  }
  return predicted
}

export interface Gain {
  /** Mean loss before less mean loss after, over the stretches; above zero the fit is better. */
  mean: number
  /** Standard error of that mean, from the scatter of the stretches. */
  standardError: number
  /** Mean over two standard errors above zero. */
  isEvident: boolean
}

/** Losses of the same observations before and after. */
export function gainOf(before: readonly number[], after: readonly number[], parts: number): Gain {
  const differences = stretches(before.length, parts).map(({ from, to }) => {
    let sum = 0
    for (let n = from; n < to; n++) sum += before[n] - after[n]
    return sum / (to - from)
  })
  const mean = differences.reduce((sum, one) => sum + one, 0) / parts
  const variance = differences.reduce((sum, one) => sum + (one - mean) ** 2, 0) / (parts - 1)
  const standardError = Math.sqrt(variance / parts)
  return { mean, standardError, isEvident: mean > 2 * standardError && mean > 0 }
}

/** Calibration by bins: what was predicted against what was seen, in bins of as even a count as can be. */
import { stretches } from './folds.ts'

export interface CalibrationBin {
  /** Of the predictions in it. */
  from: number
  to: number
  count: number
  meanPredicted: number
  /** Mean of the observed heights, or share of yes. */
  meanObserved: number
  /** Standard error of a mean; of a share the half width of Wilson's interval at one standard deviation. */
  standardError: number
}

/** At least this many in a bin, and ten bins at most. */
const leastInBin = 10
const mostBins = 10

/** `observed` numbers, or 0 and 1 for sightings. */
export function calibrationBins(
  predicted: readonly number[],
  observed: readonly number[],
  kind: 'mean' | 'share',
): CalibrationBin[] {
  const order = predicted.map((_, n) => n).sort((a, b) => predicted[a] - predicted[b])
  const bins = Math.max(1, Math.min(mostBins, Math.floor(order.length / leastInBin)))
  return stretches(order.length, bins).map(({ from, to }) => {
    const members = order.slice(from, to)
    const count = members.length
    const mean = (values: readonly number[]): number => members.reduce((sum, n) => sum + values[n], 0) / count
    const meanObserved = mean(observed)
    const scatter = Math.sqrt(
      members.reduce((sum, n) => sum + (observed[n] - meanObserved) ** 2, 0) / (count - 1) / count,
    )
    return {
      from: predicted[members[0]],
      to: predicted[members[count - 1]],
      ...{ count, meanPredicted: mean(predicted), meanObserved },
      standardError: kind === 'mean' ? scatter : wilsonHalfWidth(meanObserved, count),
    }
  })
}

/** Half width at one standard deviation (Wilson 1927); never zero, so that 0 of 10 is not shown as certain. */
export function wilsonHalfWidth(share: number, count: number): number {
  return Math.sqrt((share * (1 - share)) / count + 1 / (4 * count * count)) / (1 + 1 / count)
}

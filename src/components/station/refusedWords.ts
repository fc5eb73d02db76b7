/** What an estimate without a vector says of the directions it saw. */
import { bothSenses } from '../../../shared/directions.ts'
import type { EstimateResult, OpposedTrains } from '../../../shared/schemas/estimate.ts'
import { decimals, metresPerSecond, percent, seconds } from '../../../shared/units.ts'

export function opposedWords({ toward, opposedToward, period, amplitudeRatio, phaseLock }: OpposedTrains): string {
  return `Stronger train ${bothSenses(toward)}; against it ${bothSenses(opposedToward)} with ${percent(amplitudeRatio)} of its amplitude at ${seconds(period)}, phase lock ${decimals(phaseLock, 2)} of 1.`
}

export const runnerUpWords = ({ toward, speed, ratio }: NonNullable<EstimateResult['runnerUp']>): string =>
  `The other that fits: ${bothSenses(toward)}, ${metresPerSecond(speed)}, beam ${decimals(ratio, 2)} of the best.`

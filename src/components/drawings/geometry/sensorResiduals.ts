/** What the pairs' residual lags say of each sensor. */
import type { TraceSpeed } from '../../../../shared/schemas/estimate.ts'

/**
 * Lag left over at each sensor, s: the offsets (mean zero) that explain the pairs' residuals best in the sense of
 * least squares; for all pairs of n sensors that is the sum of the residuals toward a sensor over n. Null where a
 * sensor has no pair with a residual.
 */
export function sensorResiduals(
  sensors: readonly string[],
  pairs: readonly Pick<TraceSpeed, 'between' | 'residual'>[],
): { name: string; residual: number | null }[] {
  return sensors.map((name) => {
    let sum = 0
    let count = 0
    for (const { between, residual } of pairs) {
      if (residual === null || !between.includes(name)) continue
      sum += between[1] === name ? residual : -residual
      count++
    }
    return { name, residual: count === 0 ? null : sum / (count + 1) }
  })
}

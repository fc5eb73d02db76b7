/** Takes the mean and the straight line of least squares out of a series, so that tide does not leak into the sea band. */

/** Mean and slope per sample of the finite samples; zeroes where there are none. `origin` is the index where the line has the value `mean`. */
export function straightLine(series: Float64Array): { mean: number; slope: number; origin: number; count: number } {
  let count = 0
  let sumIndex = 0
  let sum = 0
  for (let i = 0; i < series.length; i++) {
    const value = series[i]
    if (value !== value) continue
    count++
    sumIndex += i
    sum += value
  }
  if (count === 0) return { mean: 0, slope: 0, origin: 0, count }
  const origin = sumIndex / count
  const mean = sum / count
  let across = 0
  let along = 0
  for (let i = 0; i < series.length; i++) {
    const value = series[i]
    if (value !== value) continue
    const lever = i - origin
    across += lever * lever
    along += lever * (value - mean)
  }
  return { mean, slope: across > 0 ? along / across : 0, origin, count }
}

/** A new series without mean and straight line; missing samples (NaN) stay missing. */
export function detrend(series: Float64Array): Float64Array {
  const { mean, slope, origin } = straightLine(series)
  const flat = new Float64Array(series.length)
  for (let i = 0; i < series.length; i++) flat[i] = series[i] - mean - slope * (i - origin)
  return flat
}

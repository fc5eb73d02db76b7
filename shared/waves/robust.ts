/** Middle and spread that single wild samples do not move. Missing samples (NaN) are passed over. */

/** Median of the finite samples; NaN when there is none. */
export function median(series: Float64Array): number {
  return quantile(finite(series), 0.5)
}

/** The values below which the given shares of the finite samples lie; NaN when there is none. */
export function quantilesOf(series: Float64Array, shares: readonly number[]): number[] {
  const values = finite(series)
  return shares.map((share) => quantile(values, share))
}

/** 1.4826 times the median distance from the median: the standard deviation of a Gaussian record. */
export function robustSpread(series: Float64Array): number {
  const values = finite(series)
  if (values.length === 0) return 0
  const middle = quantile(values, 0.5)
  for (let i = 0; i < values.length; i++) values[i] = Math.abs(values[i] - middle)
  return 1.4826 * quantile(values, 0.5)
}

function finite(series: Float64Array): Float64Array {
  let found = 0
  const values = new Float64Array(series.length)
  for (let i = 0; i < series.length; i++) if (series[i] === series[i]) values[found++] = series[i]
  return values.subarray(0, found)
}

/** Quickselect (Hoare 1961); reorders `values`. */
function quantile(values: Float64Array, share: number): number {
  if (values.length === 0) return NaN
  const wanted = Math.min(values.length - 1, Math.floor(share * values.length))
  let low = 0
  let high = values.length - 1
  while (low < high) {
    const pivot = values[(low + high) >> 1]
    let i = low
    let j = high
    while (i <= j) {
      while (values[i] < pivot) i++
      while (values[j] > pivot) j--
      if (i <= j) {
        const kept = values[i]
        values[i++] = values[j]
        values[j--] = kept
      }
    }
    if (wanted <= j) high = j
    else if (wanted >= i) low = i
    else break
  }
  return values[wanted]
}

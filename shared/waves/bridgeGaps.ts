/** Missing samples of a detrended series: short gaps are bridged, long ones stay at rest (zero) and are marked. */

/**
 * Bridges runs of at most `longest` missing samples by a cubic through the two samples on either side (Catmull & Rom
 * 1974), a straight line where fewer are there. Longer runs become zero. Returns which samples stand in a long run.
 */
export function bridgeGaps(series: Float64Array, longest: number): Uint8Array {
  const unbridged = new Uint8Array(series.length)
  let at = 0
  while (at < series.length) {
    if (series[at] === series[at]) {
      at++
      continue
    }
    const start = at
    while (at < series.length && series[at] !== series[at]) at++
    const length = at - start
    if (start === 0 || at === series.length || length > longest) {
      series.fill(0, start, at)
      unbridged.fill(1, start, at)
    } else bridge(series, start, at)
  }
  return unbridged
}

function bridge(series: Float64Array, start: number, end: number): void {
  const span = end - start + 1
  const before = series[start - 1]
  const after = series[end]
  const slopeIn =
    start >= 2 && series[start - 2] === series[start - 2] ? before - series[start - 2] : (after - before) / span
  const next = end + 1 < series.length ? series[end + 1] : NaN
  const slopeOut = next === next ? next - after : (after - before) / span
  for (let i = start; i < end; i++) {
    const u = (i - start + 1) / span
    const v = 1 - u
    series[i] = before * v * v * (1 + 2 * u) + after * u * u * (1 + 2 * v) + span * u * v * (slopeIn * v - slopeOut * u)
  }
}

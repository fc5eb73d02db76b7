/**
 * Measured crest times: local maxima of a trace, refined by a parabola through the highest sample and its two
 * neighbours, and followed from sensor to sensor with the help of the fitted slowness. The picks are measured, only
 * the search for them is guided.
 */

/** One sensor's record about its mean; NaN for a missing sample. */
export interface PickedTrace {
  /** Metres along the heading, from the first sensor that the waves reach. */
  along: number
  values: readonly number[]
}

export interface Crest {
  /** Seconds from the first sample. */
  time: number
  value: number
}

export interface FollowedCrest {
  /** One for each trace; null where no maximum lies near. */
  picks: (Crest | null)[]
  /** Seconds from the first sample at which the fitted line passes the first sensor. */
  passesFirst: number
}

/** Maxima of a record, rising in time. Sampling interval in seconds. */
export function crestsOf(values: readonly number[], interval: number): Crest[] {
  const found: Crest[] = []
  for (let n = 1; n < values.length - 1; n++) {
    const [before, here, after] = [values[n - 1], values[n], values[n + 1]]
    if (!(here > before && here >= after)) continue
    const curvature = before - 2 * here + after
    const shift = curvature < 0 ? (0.5 * (before - after)) / curvature : 0
    found.push({ time: (n + shift) * interval, value: here - 0.25 * (before - after) * shift })
  }
  return found
}

/** Running mean with triangular weights, so that a ripple on a crest is not taken for the crest; gaps stay gaps. */
export function smoothed(values: readonly number[], halfWidth: number): number[] {
  if (halfWidth < 1) return [...values]
  return values.map((_, n) => {
    let sum = 0
    let weights = 0
    for (let k = -halfWidth; k <= halfWidth; k++) {
      const value = values[n + k]
      if (value === undefined) continue
      const weight = halfWidth + 1 - Math.abs(k)
      sum += weight * value
      weights += weight
    }
    return sum / weights
  })
}

/**
 * Crests that could be followed over at least three sensors, newest first. `slowness` in s/m along the heading,
 * `period` in s.
 */
export function followCrests(
  traces: readonly PickedTrace[],
  interval: number,
  slowness: number,
  period: number,
): FollowedCrest[] {
  const halfWidth = Math.floor(period / 12 / interval)
  const crests = traces.map((trace) => crestsOf(smoothed(trace.values, halfWidth), interval))
  const first = traces.reduce((best, trace, index) => (trace.along < traces[best].along ? index : best), 0)
  const followed: FollowedCrest[] = []
  for (const start of crests[first] ?? []) {
    const picks = traces.map((trace, index) => {
      const expected = start.time + (trace.along - traces[first].along) * slowness
      const near = crests[index].filter((crest) => Math.abs(crest.time - expected) < period / 4)
      // A wave's crest is the highest maximum about its time, not a ripple beside it.
      return near.sort((a, b) => b.value - a.value)[0] ?? null
    })
    const found = picks.flatMap((pick, index) => (pick ? [{ pick, along: traces[index].along }] : []))
    if (found.length < Math.min(3, traces.length) || start.value <= 0) continue
    const passesFirst =
      found.reduce((sum, { pick, along }) => sum + pick.time - (along - traces[first].along) * slowness, 0) /
      found.length
    const before = followed.at(-1)
    if (before && passesFirst - before.passesFirst < period / 2) {
      if (start.value > (before.picks[first]?.value ?? 0)) followed[followed.length - 1] = { picks, passesFirst }
      continue
    }
    followed.push({ picks, passesFirst })
  }
  return followed.reverse()
}

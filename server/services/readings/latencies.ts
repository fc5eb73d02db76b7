/** A distribution of latencies in classes 10 % wide from 10 ms to over a day: enough for a percentile, little to keep. */
const shortest = 0.01
const ratio = 1.1
const classes = 170

export interface Latencies {
  add(seconds: number): void
  /** Upper edge of the class that 95 % do not exceed, s; null when nothing was added. */
  percentile95(): number | null
}

export function createLatencies(): Latencies {
  const counts = new Uint32Array(classes)
  let total = 0
  return {
    add(seconds) {
      const place = Math.ceil(Math.log(Math.max(seconds, shortest) / shortest) / Math.log(ratio))
      const index = Math.min(classes - 1, place)
      counts[index] = (counts[index] ?? 0) + 1
      total += 1
    },
    percentile95() {
      let below = 0
      for (let index = 0; index < classes; index++) {
        below += counts[index] ?? 0
        if (total > 0 && below >= 0.95 * total) return shortest * ratio ** index
      }
      return null
    },
  }
}

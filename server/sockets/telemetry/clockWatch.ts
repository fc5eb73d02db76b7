/** The difference between a station's clock and ours: the median of arrival less sending over the last messages. */
const remembered = 31
/** A change smaller than this is no news. */
const newsSeconds = 0.1
const messagesBeforeNews = 5

export interface ClockWatch {
  /** Times in ms since 1970 UTC. Answers the offset in seconds when it is news, else null. */
  note(sentAt: number, arrivedAt: number): number | null
  /** Arrived less sent, s; null before the first message. */
  offset(): number | null
}

export function createClockWatch(): ClockWatch {
  const offsets: number[] = []
  let count = 0
  let told: number | null = null
  const median = (): number | null => offsets.toSorted((a, b) => a - b)[Math.floor(offsets.length / 2)] ?? null
  return {
    offset: median,
    note(sentAt, arrivedAt) {
      offsets.push((arrivedAt - sentAt) / 1000)
      if (offsets.length > remembered) offsets.shift()
      count += 1
      const now = median()
      if (now === null || count < messagesBeforeNews) return null
      if (told !== null && Math.abs(now - told) < newsSeconds) return null
      told = now
      return now
    },
  }
}

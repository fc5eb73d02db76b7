/**
 * How fast a station may send: fifty times real time when it fills in what it buffered, with a quarter's grace and a
 * reserve for what was on its way. Counted twice: seconds of record, and messages whatever is in them.
 */
const timesRealTime = 50
const grace = 1.25
const shortestFrameSeconds = 0.25

const recordPerSecond = timesRealTime * grace
const recordReserve = 600
const messagesPerSecond = recordPerSecond / shortestFrameSeconds
const messageReserve = 2_000

export interface Pace {
  /** False when a message comes too soon after the others. */
  takeMessage(monotonicMs: number): boolean
  /** False when these seconds of record come too soon after the others. */
  takeRecord(seconds: number, monotonicMs: number): boolean
}

export function createPace(): Pace {
  const messages = createBucket(messagesPerSecond, messageReserve)
  const record = createBucket(recordPerSecond, recordReserve)
  return {
    takeMessage: (now) => messages(1, now),
    takeRecord: record,
  }
}

/** A bucket that fills at a rate and from which no more can be taken than is in it. */
function createBucket(perSecond: number, size: number): (amount: number, monotonicMs: number) => boolean {
  let level = size
  let filledAt: number | null = null
  return (amount, now) => {
    level = Math.min(size, level + ((now - (filledAt ?? now)) / 1000) * perSecond)
    filledAt = now
    if (amount > level) return false
    level -= amount
    return true
  }
}

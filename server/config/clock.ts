/** Time as an object, so that a test can hold it. Ages and deadlines use `now`; durations use `monotonic`. */
export interface Clock {
  now(): Date
  /** Milliseconds that only grow. */
  monotonic(): number
}

export const systemClock: Clock = {
  now: () => new Date(),
  monotonic: () => performance.now(),
}

/** Time and timers as an object, so that a test can hold them. */
export interface SimulatorClock {
  /** Milliseconds since 1970 UTC. */
  now(): number
  /** Both return the function that calls the timer off. */
  after(milliseconds: number, act: () => void): () => void
  every(milliseconds: number, act: () => void): () => void
}

export const systemClock: SimulatorClock = {
  now: () => Date.now(),
  after(milliseconds, act) {
    const timer = setTimeout(act, milliseconds)
    return () => clearTimeout(timer)
  },
  every(milliseconds, act) {
    const timer = setInterval(act, milliseconds)
    return () => clearInterval(timer)
  },
}

/** How many e-mails may go out now: a mail server that is asked too fast takes none at all. */
import type { Clock } from '../../config/clock.ts'

export interface RateLimit {
  /** Whole e-mails that may go now. */
  free(): number
  take(count: number): void
}

export function createRateLimit(clock: Clock, aMinute: number): RateLimit {
  let tokens = aMinute
  let at = clock.monotonic()
  return {
    free() {
      const now = clock.monotonic()
      tokens = Math.min(aMinute, tokens + ((now - at) / 60_000) * aMinute)
      at = now
      return Math.floor(tokens)
    },
    take(count) {
      tokens -= count
    },
  }
}

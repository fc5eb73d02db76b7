/** A clock that stands still until the test moves it. */
import type { Clock } from '../../server/config/clock.ts'

export interface FakeClock extends Clock {
  /** Moves both hands on. */
  advance(seconds: number): void
  set(time: string | Date): void
}

export function fakeClock(start: string | Date = '2026-12-01T06:00:00Z'): FakeClock {
  let now = new Date(start).getTime()
  let monotonic = 0
  return {
    now: () => new Date(now),
    monotonic: () => monotonic,
    advance(seconds) {
      now += seconds * 1000
      monotonic += seconds * 1000
    },
    set(time) {
      now = new Date(time).getTime()
    },
  }
}

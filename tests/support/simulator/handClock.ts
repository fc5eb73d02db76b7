/** A clock that a test turns by hand. Timers act when the time is turned past them, in order. */
import type { SimulatorClock } from '../../../simulator/clock.ts'

interface Timer {
  at: number
  every: number | null
  act: () => void
}

export interface HandClock extends SimulatorClock {
  turn(milliseconds: number): void
}

export function handClock(start: number): HandClock {
  let now = start
  const timers = new Set<Timer>()
  const add = (timer: Timer) => {
    timers.add(timer)
    return () => void timers.delete(timer)
  }
  return {
    now: () => now,
    after: (milliseconds, act) => add({ at: now + milliseconds, every: null, act }),
    every: (milliseconds, act) => add({ at: now + milliseconds, every: milliseconds, act }),
    turn(milliseconds) {
      const end = now + milliseconds
      for (;;) {
        const due = [...timers].filter(({ at }) => at <= end).sort((a, b) => a.at - b.at)[0]
        if (!due) break
        now = Math.max(now, due.at)
        if (due.every === null) timers.delete(due)
        else due.at += due.every
        due.act()
      }
      now = end
    },
  }
}

/** A few links asked for from one address within a quarter of an hour, whomever they are for. */
import type { Clock } from '../../config/clock.ts'

const spanMilliseconds = 15 * 60_000
const most = 5
const mostAddresses = 20_000

export function createAskThrottle(clock: Clock) {
  const asked = new Map<string, number[]>()
  return {
    /** Seconds to wait; 0: asked, and counted. */
    ask(address: string): number {
      const now = clock.now().getTime()
      const recent = (asked.get(address) ?? []).filter((at) => now - at < spanMilliseconds)
      const oldest = recent[0]
      if (recent.length >= most && oldest !== undefined) return (oldest + spanMilliseconds - now) / 1000
      if (asked.size > mostAddresses) asked.clear()
      asked.set(address, [...recent, now])
      return 0
    },
  }
}

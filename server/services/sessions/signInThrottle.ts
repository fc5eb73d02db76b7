/**
 * Slows guessing down without locking anybody out. Failures count by account and address together, so a stranger who
 * guesses at an account delays only himself; by address, so many accounts do not help; and by account over all
 * addresses, which delays only addresses from which this account never signed in.
 */
import type { Clock } from '../../config/clock.ts'

interface Rule {
  /** Failures before the first delay. */
  free: number
  firstDelaySeconds: number
  longestDelaySeconds: number
}

const rules = {
  accountAndAddress: { free: 5, firstDelaySeconds: 15, longestDelaySeconds: 900 },
  address: { free: 30, firstDelaySeconds: 15, longestDelaySeconds: 300 },
  account: { free: 60, firstDelaySeconds: 30, longestDelaySeconds: 900 },
} satisfies Record<string, Rule>

interface Tally {
  failures: number
  /** Milliseconds since 1970. */
  notBefore: number
  lastAt: number
}

const forgetAfter = 24 * 3600_000
const mostTallies = 20_000

export function createSignInThrottle(clock: Clock) {
  const tallies = new Map<string, Tally>()
  const knownAddresses = new Set<string>()

  const keysOf = (account: string, address: string): [string, Rule][] => {
    const both = JSON.stringify([account, address])
    return [
      [`both ${both}`, rules.accountAndAddress],
      [`address ${address}`, rules.address],
      ...(knownAddresses.has(both) ? [] : [[`account ${account}`, rules.account] satisfies [string, Rule]]),
    ]
  }

  function forget(now: number): void {
    for (const [key, tally] of tallies) {
      if (now - tally.lastAt > forgetAfter || tallies.size > mostTallies) tallies.delete(key)
    }
    if (knownAddresses.size > mostTallies) knownAddresses.clear()
  }

  function countFailure(key: string, rule: Rule, now: number): void {
    const failures = (tallies.get(key)?.failures ?? 0) + 1
    const doublings = Math.min(20, failures - rule.free)
    const delay = doublings < 0 ? 0 : Math.min(rule.longestDelaySeconds, rule.firstDelaySeconds * 2 ** doublings)
    tallies.set(key, { failures, notBefore: now + delay * 1000, lastAt: now })
  }

  return {
    /** Seconds to wait; 0: try, and the attempt counts as failed until `succeeded` is called. */
    begin(account: string, address: string): number {
      const now = clock.now().getTime()
      const keys = keysOf(account, address)
      const wait = Math.max(...keys.map(([key]) => (tallies.get(key)?.notBefore ?? 0) - now))
      if (wait > 0) return wait / 1000
      forget(now)
      for (const [key, rule] of keys) countFailure(key, rule, now)
      return 0
    },
    succeeded(account: string, address: string): void {
      for (const [key] of keysOf(account, address)) {
        if (key.startsWith('both')) tallies.delete(key)
        else takeBack(key)
      }
      knownAddresses.add(JSON.stringify([account, address]))
    },
    /** The passphrase fits and a code is still asked for: this attempt counts neither way. */
    uncount(account: string, address: string): void {
      for (const [key] of keysOf(account, address)) takeBack(key)
    },
  }

  /** A success takes back its own attempt only: guessing at others from the same address still counts. */
  function takeBack(key: string): void {
    const tally = tallies.get(key)
    if (tally) tallies.set(key, { ...tally, failures: Math.max(0, tally.failures - 1), notBefore: 0 })
  }
}

export type SignInThrottle = ReturnType<typeof createSignInThrottle>

const throttles = new WeakMap<Clock, SignInThrottle>()

/** One for a process: whoever is asked for a passphrase at two doors is counted once. */
export function throttleOf({ clock }: { clock: Clock }): SignInThrottle {
  const known = throttles.get(clock) ?? createSignInThrottle(clock)
  throttles.set(clock, known)
  return known
}

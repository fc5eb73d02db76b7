/** What became of an e-mail to one person: the mail server's word, and the person's own. Pure. */
import type { QualityFlag } from '../../../shared/schemas/estimate.ts'
import type { DeliveryState } from '../../../shared/schemas/message.ts'
import { momentUtc } from '../../../shared/times.ts'

interface Seen {
  state: DeliveryState
  attempts: number
  nextAttemptAt: string | null
  acceptedAt: string | null
}

const tries = (count: number): string => `${count} ${count === 1 ? 'try' : 'tries'}`

/** `accepted by mail server 14:20`, `not out: 3 tries, next 14:34`. Accepted is not delivered, and not read. */
export function deliveryWords({ state, attempts, nextAttemptAt, acceptedAt }: Seen, nowMs: number): string {
  const at = (iso: string | null): string => (iso ? ` ${momentUtc(Date.parse(iso), nowMs)}` : '')
  switch (state) {
    case 'accepted':
      return `accepted by mail server${at(acceptedAt)}`
    case 'queued':
      if (attempts === 0) return 'not out yet: waits for the mail server'
      return `not out: ${tries(attempts)}${nextAttemptAt ? `, next${at(nextAttemptAt)}` : ''}`
    case 'leased':
      return 'is being handed to the mail server'
    case 'refused':
      return `not out: refused by the mail server after ${tries(attempts)}`
    case 'givenUp':
      return `not out: given up after ${tries(attempts)}`
    case 'unknown':
      return 'not known whether it went out: the mail server broke off'
    case 'merged':
      return 'its news went out in one e-mail with others'
  }
}

/** Tick: the person confirmed. Ring: out, no word yet. Two dashes: not out. */
export function deliveryMark(deliveries: readonly Seen[], receivedAt: string | null): QualityFlag {
  if (receivedAt) return 1
  const newest = deliveries.at(-1)
  return newest && (newest.state === 'accepted' || newest.state === 'merged') ? 2 : 9
}

export const isNotOut = (state: DeliveryState): boolean =>
  state === 'queued' || state === 'leased' || state === 'refused' || state === 'givenUp' || state === 'unknown'

/** All of one person: times of acceptance together, then what is not out, then the receipt. */
export function toldWords(deliveries: readonly Seen[], receivedAt: string | null, nowMs: number): string {
  if (receivedAt) return `receipt confirmed ${momentUtc(Date.parse(receivedAt), nowMs)}`
  const accepted = deliveries.filter((one) => one.state === 'accepted' && one.acceptedAt)
  const rest = deliveries.filter((one) => one.state !== 'accepted').map((one) => deliveryWords(one, nowMs))
  const times = accepted.map(({ acceptedAt }) => momentUtc(Date.parse(acceptedAt ?? ''), nowMs)).join(', ')
  const parts = times ? [`accepted by mail server ${times}`, ...rest] : rest
  if (parts.length === 0) return 'not told yet'
  return times ? `${parts.join('; ')}; no receipt yet` : parts.join('; ')
}

/** `for Harbour master`: whose deputy was told; empty where the person was meant. */
export function standInWords(deliveries: readonly { standsInFor: string | null }[]): string {
  const names = [...new Set(deliveries.flatMap(({ standsInFor }) => standsInFor ?? []))]
  return names.length === 0 ? '' : ` for ${names.join(', ')}`
}

/** Which e-mails count as not out: where nothing is done, somebody is not told. One rule for the alert line and Messages. */
import type { DeliveryState } from '../schemas/message.ts'

/** What was refused or given up is news for so long; then it is history. */
export const notOutForMs = 24 * 3_600_000

/** Tried without success and still waiting, or refused or given up within the last day. Times are ms since 1970 UTC. */
export function isNotOutNow(
  { state, attempts }: { state: DeliveryState; attempts: number },
  writtenAt: number,
  now: number,
): boolean {
  if (state === 'queued' || state === 'leased') return attempts > 0
  return (state === 'refused' || state === 'givenUp') && writtenAt > now - notOutForMs
}

/** Where a bulletin stands by the clock. */
import type { BulletinContent, BulletinView } from '../schemas/bulletin.ts'

export type Term = 'draft' | 'toCome' | 'inForce' | 'past' | 'replaced' | 'cancelled'

/** `nowMs`: server time, ms since 1970 UTC. Once the term is past the figures are no longer shown as those of now. */
export function termOf(
  { status, validFrom, validUntil }: Pick<BulletinView, 'status'> & Pick<BulletinContent, 'validFrom' | 'validUntil'>,
  nowMs: number,
): Term {
  if (status !== 'issued') return status
  if (validUntil !== null && nowMs >= Date.parse(validUntil)) return 'past'
  return validFrom !== null && nowMs < Date.parse(validFrom) ? 'toCome' : 'inForce'
}

/** Why a draft cannot be issued yet, each as a sentence beside its field; empty when it can. */
export function draftFaults(
  { headline, audience, meaning, validFrom, validUntil, nextIssueAt, listIds, chosen }: BulletinDraftFields,
  nowMs: number,
): { field: string; fault: string }[] {
  const faults: { field: string; fault: string }[] = []
  const add = (field: string, fault: string): number => faults.push({ field, fault })
  if (!headline.trim()) add('headline', 'Write a headline.')
  if (!audience.trim()) add('audience', 'Say whom it is for.')
  if (!meaning.trim()) add('meaning', 'Write what the figures mean for them.')
  if (chosen.length === 0) add('chosen', 'Choose at least one station or place.')
  if (listIds.length === 0) add('listIds', 'Choose at least one list: nobody would get it.')
  if (validFrom === null) add('validFrom', 'Set from when it holds.')
  if (validUntil === null) add('validUntil', 'Set until when it holds.')
  if (validFrom !== null && validUntil !== null && Date.parse(validUntil) <= Date.parse(validFrom)) {
    add('validUntil', 'The end must come after the beginning.')
  }
  if (validUntil !== null && Date.parse(validUntil) <= nowMs) add('validUntil', 'The end is past already.')
  if (nextIssueAt !== null && Date.parse(nextIssueAt) <= nowMs) add('nextIssueAt', 'The next issue is past already.')
  return faults
}
type BulletinDraftFields = NonNullable<BulletinView['draft']>

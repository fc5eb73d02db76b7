/** How bulletins are spoken of on their pages. Pure. */
import type { Term } from '../../../shared/bulletins/term.ts'
import type { BulletinDraft, BulletinView } from '../../../shared/schemas/bulletin.ts'

export const termTitles: Record<Term, string> = {
  draft: 'Draft',
  toCome: 'To come',
  inForce: 'In force',
  past: 'Past',
  replaced: 'Replaced',
  cancelled: 'Cancelled',
}

/** Why the figures of an issue are no longer those to go by; null while it is in force or to come. */
export const outOfForceWords: Record<Term, string | null> = {
  draft: null,
  toCome: null,
  inForce: null,
  past: 'Its term is past. The figures are those of then and say nothing of now.',
  replaced: 'It was replaced by a later bulletin. The figures are those of then and say nothing of now.',
  cancelled: 'It was cancelled. The figures are those of then and say nothing of now.',
}

const counted = (count: number, one: string, many: string): string => `${count} ${count === 1 ? one : many}`

/** `4 lists, 61 people`. */
export const reachWords = ({ lists, people }: BulletinView['reach']): string =>
  `${counted(lists.length, 'list', 'lists')}, ${counted(people, 'person', 'people')}`

/** What became of its e-mails. The mail server's word is the last that is known. */
export function deliveryWords({ accepted, notOut }: BulletinView['deliveries']): string {
  if (accepted + notOut === 0) return 'no e-mail written yet'
  const taken = `${counted(accepted, 'e-mail', 'e-mails')} accepted by the mail server`
  return notOut === 0 ? taken : `${taken}, ${notOut} not out`
}

const fieldNames: Record<keyof BulletinDraft, string> = {
  ...{ marker: 'Kind', audience: 'For', headline: 'Headline', validFrom: 'In force from', validUntil: 'In force to' },
  ...{ nextIssueAt: 'Next issue', meaning: 'What it means', listIds: 'Lists', chosen: 'Figures chosen' },
  ...{ replacesId: 'Replaces', isExercise: 'Exercise' },
}

/** Names of the fields in which two drafts differ. */
export const differingFields = (one: BulletinDraft, other: BulletinDraft): string[] =>
  (Object.keys(fieldNames) as (keyof BulletinDraft)[])
    .filter((field) => JSON.stringify(one[field]) !== JSON.stringify(other[field]))
    .map((field) => fieldNames[field])

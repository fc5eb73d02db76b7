/** A draft as its form has it, and where a new one begins. Pure. */
import { figureKey } from '../../../shared/bulletins/figureKey.ts'
import type { BulletinDraft, BulletinFigure, BulletinView } from '../../../shared/schemas/bulletin.ts'

/** Times as the fields hold them, `2026-11-12T15:00`, UTC; empty: not set. */
export type DraftForm = Omit<BulletinDraft, 'validFrom' | 'validUntil' | 'nextIssueAt'> & {
  validFrom: string
  validUntil: string
  nextIssueAt: string
}

const written = (time: string | null): string => (time === null ? '' : new Date(time).toISOString().slice(0, 16))

const wholeMoment = /^\d{4}-\d\d-\d\dT\d\d:\d\d(:\d\d)?$/

/** Null: nothing is set, or what stands there is no moment. */
export function momentOf(field: string): string | null {
  const ms = wholeMoment.test(field) ? Date.parse(`${field}Z`) : NaN
  return Number.isNaN(ms) ? null : new Date(ms).toISOString()
}

export const formOf = (draft: BulletinDraft): DraftForm => ({
  ...draft,
  listIds: [...draft.listIds],
  chosen: [...draft.chosen],
  validFrom: written(draft.validFrom),
  validUntil: written(draft.validUntil),
  nextIssueAt: written(draft.nextIssueAt),
})

export const draftOf = (form: DraftForm): BulletinDraft => ({
  ...form,
  listIds: [...form.listIds],
  chosen: [...form.chosen],
  validFrom: momentOf(form.validFrom),
  validUntil: momentOf(form.validUntil),
  nextIssueAt: momentOf(form.nextIssueAt),
})

const tenMinutes = 600_000
const usualTerm = 6 * 3_600_000

/** From the next ten minutes on, for so long; the next issue is due at its end. */
function termFrom(nowMs: number, length: number): Pick<BulletinDraft, 'validFrom' | 'validUntil' | 'nextIssueAt'> {
  const from = Math.ceil(nowMs / tenMinutes) * tenMinutes
  const until = new Date(from + length).toISOString()
  return { validFrom: new Date(from).toISOString(), validUntil: until, nextIssueAt: until }
}

/** Everything that there is goes in, what is missing too: it is said. */
export const firstDraft = (figures: readonly BulletinFigure[], nowMs: number): BulletinDraft => ({
  ...{ marker: 'information', audience: '', headline: '', meaning: '', listIds: [], isExercise: false },
  ...{ replacesId: null, chosen: figures.map(figureKey).slice(0, 40) },
  ...termFrom(nowMs, usualTerm),
})

/** The words, lists and subjects of a former issue with a term from now on; `replaces`: it takes the place of that one. */
export function draftAfter(former: BulletinView, nowMs: number, replaces: boolean): BulletinDraft {
  const { validFrom, validUntil } = former
  const length = validFrom && validUntil ? Date.parse(validUntil) - Date.parse(validFrom) : usualTerm
  return {
    ...{ marker: former.marker, audience: former.audience, headline: former.headline, meaning: former.meaning },
    ...{ listIds: former.reach.lists.map(({ id }) => id), chosen: former.figures.map(figureKey) },
    ...{ isExercise: former.isExercise, replacesId: replaces ? former.id : null },
    ...termFrom(nowMs, length),
  }
}

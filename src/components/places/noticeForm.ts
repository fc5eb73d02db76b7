/** What is typed to set a flag, a closure or an advisory, and its way to the contract. Pure. */
import { noticeDraft } from '../../../shared/schemas/placeNotice.ts'
import type { NoticeDraft, NoticeKind } from '../../../shared/schemas/placeNotice.ts'
import { faultsOf } from '../setUp/formFaults.ts'

export interface NoticeForm {
  kind: NoticeKind
  flag: string
  area: string
  text: string
  /** Local day and clock of the port; empty day with `hasEnd` false: until withdrawn. */
  endDay: string
  endTime: string
  hasEnd: boolean
  startsLater: boolean
  startDay: string
  startTime: string
  reason: string
}

export const newNoticeForm = (kind: NoticeKind, endDay: string, endTime: string): NoticeForm => ({
  ...{ kind, flag: '', area: '', text: '', endDay, endTime, hasEnd: kind !== 'flag', reason: '' },
  ...{ startsLater: false, startDay: endDay, startTime: endTime },
})

export type NoticeFormResult = { draft: NoticeDraft; faults: null } | { draft: null; faults: Record<string, string> }

/** `momentOf` turns a local day and clock into ISO 8601; null where there is no such moment. */
export function noticeDraftOf(
  form: NoticeForm,
  momentOf: (day: string, time: string) => string | null,
): NoticeFormResult {
  const expiresAt = form.hasEnd ? momentOf(form.endDay, form.endTime) : null
  const startsAt = form.startsLater ? momentOf(form.startDay, form.startTime) : null
  const faults: Record<string, string> = {}
  if (form.hasEnd && expiresAt === null) faults.expiresAt = 'a day and a time'
  if (form.startsLater && startsAt === null) faults.startsAt = 'a day and a time'
  if (startsAt && expiresAt && startsAt >= expiresAt) faults.expiresAt = 'must lie after its beginning'
  const span = { startsAt, reason: form.reason, expiresAt }
  const parsed = noticeDraft.safeParse(
    form.kind === 'flag'
      ? { kind: 'flag', flag: form.flag, ...span }
      : form.kind === 'closure'
        ? { kind: 'closure', area: form.area, ...span }
        : { kind: 'advisory', area: form.area, text: form.text, ...span },
  )
  if (!parsed.success) {
    const found = faultsOf(parsed.error)
    if (found.flag) found.flag = 'choose one'
    for (const field of ['area', 'text', 'reason']) if (found[field]) found[field] = 'at least three letters'
    return { draft: null, faults: { ...found, ...faults } }
  }
  return Object.keys(faults).length > 0 ? { draft: null, faults } : { draft: parsed.data, faults: null }
}

/** Notices as the API shows them. */
import { noticeState } from '../../../shared/notices/state.ts'
import { noticeContent } from '../../../shared/schemas/placeNotice.ts'
import type { NoticeView } from '../../../shared/schemas/placeNotice.ts'
import type { Parts } from '../../config/parts.ts'
import { Person } from '../../models/index.ts'
import type { Notice } from '../../models/index.ts'

const iso = (date: Date | null | undefined): string | null => date?.toISOString() ?? null

/** In the order in which they were given. */
export async function presentNotices(
  { clock }: Pick<Parts, 'clock'>,
  rows: Notice[],
  warnMs: number,
): Promise<NoticeView[]> {
  const ids = new Set(
    rows.flatMap(({ personId, withdrawnById, extensions }) => [personId, withdrawnById, ...extensions.map((one) => one.personId)]), // prettier-ignore
  )
  const known = [...ids].filter((id): id is number => id !== null)
  const people = known.length === 0 ? [] : await Person.findAll({ where: { id: known }, attributes: ['id', 'name'] })
  const nameOf = (id: number | null) => {
    const person = people.find((one) => one.id === id)
    return person ? { id: person.id, name: person.name } : null
  }
  const now = clock.now().getTime()
  return rows.map((row) => {
    const times = {
      startsAt: row.startsAt.getTime(),
      expiresAt: row.expiresAt?.getTime() ?? null,
      withdrawnAt: row.withdrawnAt?.getTime() ?? null,
      isReplaced: row.replacedById !== null,
    }
    return {
      ...{ id: row.id, version: row.version, placeId: row.placeId, kind: row.kind },
      content: noticeContent.parse(row.content),
      state: noticeState(times, now),
      startsAt: row.startsAt.toISOString(),
      expiresAt: iso(row.expiresAt),
      warnsAt: row.expiresAt ? new Date(row.expiresAt.getTime() - warnMs).toISOString() : null,
      ...{ reason: row.reason, by: nameOf(row.personId), createdAt: row.createdAt.toISOString() },
      ...{
        withdrawnAt: iso(row.withdrawnAt),
        withdrawnBy: nameOf(row.withdrawnById),
        withdrawReason: row.withdrawReason,
      },
      extensions: row.extensions.map(({ at, personId, expiresAt, reason }) => ({ at, by: nameOf(personId), expiresAt, reason })), // prettier-ignore
    }
  })
}

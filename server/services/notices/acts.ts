/** Flags, closures and advisories set, extended, withdrawn: a person decides, and who, when and why is kept. */
import type { NoticeContent, NoticeDraft, NoticeExtension, FlagSet } from '../../../shared/schemas/placeNotice.ts'
import type { Team } from '../../../shared/schemas/session.ts'
import { Notice, Place } from '../../models/index.ts'
import { changedMeanwhile, invalidInput, notFound, Refused } from '../problems.ts'
import { atNoticeDesk, tell } from './desk.ts'
import type { NoticeDesk, NoticeOffice, NoticeParts } from './desk.ts'
import { presentNotices } from './present.ts'

/** Who asks. A partner acts at the places of their team alone. */
export interface NoticeAuthor {
  id: number
  role: string
  team: Team | null
}

/** A minute for clocks that are a little behind. */
const forgivenMs = 60_000

function refuseOtherTeam(place: Place, { role, team }: NoticeAuthor): void {
  if (role !== 'partner' || (team !== null && team === place.team)) return
  const detail = `${place.name} is not a place of your team.`
  throw new Refused({ status: 403, code: 'notice.notYourTeam', title: 'Not your team', detail })
}

function contentOf(draft: NoticeDraft, flags: FlagSet, place: Place): NoticeContent {
  if (draft.kind === 'closure') return { kind: 'closure', area: draft.area }
  if (draft.kind === 'advisory') return { kind: 'advisory', area: draft.area, text: draft.text }
  if (place.kind !== 'beach') throw invalidInput([{ path: 'kind', message: 'flags are set at beaches' }])
  const flag = flags.flags.find(({ key }) => key === draft.flag)
  if (!flag) throw invalidInput([{ path: 'flag', message: 'is not in the set of this site' }])
  return { kind: 'flag', flag }
}

function timesOf(
  { now }: NoticeDesk,
  draft: Pick<NoticeDraft, 'startsAt' | 'expiresAt'>,
): { startsAt: Date; expiresAt: Date | null } {
  const startsAt = draft.startsAt === null ? now : new Date(draft.startsAt)
  const expiresAt = draft.expiresAt === null ? null : new Date(draft.expiresAt)
  const faults: { path: string; message: string }[] = []
  if (startsAt.getTime() < now.getTime() - forgivenMs)
    faults.push({ path: 'startsAt', message: 'must not lie in the past' })
  if (expiresAt && expiresAt <= now) faults.push({ path: 'expiresAt', message: 'must lie in the future' })
  if (expiresAt && expiresAt <= startsAt) faults.push({ path: 'expiresAt', message: 'must be after it begins' })
  if (faults.length > 0) throw invalidInput(faults)
  return { startsAt, expiresAt }
}

/** A new flag takes the place of the one that flies, at once; a planned one stands beside it until then. */
export const setNotice = (
  parts: NoticeParts,
  office: NoticeOffice,
  order: { placeId: number; draft: NoticeDraft; flags: FlagSet; author: NoticeAuthor },
): Promise<number> =>
  atNoticeDesk(parts, office, async (desk) => {
    const { placeId, draft, flags, author } = order
    const { transaction, now } = desk
    const place = await Place.findByPk(placeId, { lock: true, transaction })
    if (!place || place.retiredAt !== null) throw notFound('place', placeId)
    refuseOtherTeam(place, author)
    const content = contentOf(draft, flags, place)
    const times = timesOf(desk, draft)
    const notice = await Notice.create(
      {
        ...{ placeId, kind: draft.kind, content, ...times, reason: draft.reason, personId: author.id },
        ...{ extensions: [], createdAt: now, updatedAt: now },
      },
      { transaction },
    )
    if (draft.kind === 'flag' && times.startsAt <= now) await replaceFlags(desk, notice, author.id)
    const audit = { action: 'notice.set', after: { content, ...times, reason: draft.reason, placeId } }
    await tell(desk, { event: 'set', notice, place, reason: draft.reason, personId: author.id, audit })
    return notice.id
  })

/** The others that fly or have run out come down. */
export async function replaceFlags(
  { transaction, now }: NoticeDesk,
  by: Notice,
  personId: number | null,
): Promise<void> {
  const flying = await Notice.findAll({
    where: { placeId: by.placeId, kind: 'flag', withdrawnAt: null },
    lock: true,
    transaction,
  })
  for (const flag of flying) {
    if (flag.id === by.id || flag.startsAt > by.startsAt) continue
    const replaced = {
      withdrawnAt: now,
      withdrawnById: personId,
      withdrawReason: 'Another flag was set',
      replacedById: by.id,
    }
    await flag.update({ ...replaced, version: flag.version + 1, updatedAt: now }, { transaction })
  }
}

interface Change {
  noticeId: number
  version: number
  author: NoticeAuthor
}

async function locked(
  desk: NoticeDesk,
  { noticeId, version, author }: Change,
): Promise<{ notice: Notice; place: Place }> {
  const { transaction } = desk
  const notice = await Notice.findByPk(noticeId, { lock: true, transaction })
  const place = notice && (await Place.findByPk(notice.placeId, { transaction }))
  if (!notice || !place) throw notFound('notice', noticeId)
  refuseOtherTeam(place, author)
  if (notice.version !== version) {
    const [current] = await presentNotices(desk.parts, [notice], desk.office.warnMs)
    throw changedMeanwhile('notice', notice.version, current)
  }
  if (notice.withdrawnAt !== null) {
    const detail = 'It was withdrawn and is kept for the record alone.'
    throw new Refused({ status: 409, code: 'notice.withdrawn', title: 'Withdrawn', detail })
  }
  return { notice, place }
}

/** One that has expired may be extended too: it has never gone. */
export const extendNotice = (
  parts: NoticeParts,
  office: NoticeOffice,
  change: Change & { extension: NoticeExtension },
): Promise<void> =>
  atNoticeDesk(parts, office, async (desk) => {
    const { notice, place } = await locked(desk, change)
    const { extension, author } = change
    const { expiresAt } = timesOf(desk, { startsAt: null, expiresAt: extension.expiresAt })
    if (!expiresAt || expiresAt <= notice.startsAt) throw invalidInput([{ path: 'expiresAt', message: 'must be after it begins' }]) // prettier-ignore
    const before = notice.expiresAt?.toISOString() ?? null
    const entry = {
      at: desk.now.toISOString(),
      personId: author.id,
      expiresAt: expiresAt.toISOString(),
      reason: extension.reason,
    }
    await notice.update(
      {
        ...{ expiresAt, extensions: [...notice.extensions, entry], warnedAt: null, expiredToldAt: null },
        ...{ version: notice.version + 1, updatedAt: desk.now },
      },
      { transaction: desk.transaction },
    )
    const audit = { action: 'notice.extend', before: { expiresAt: before }, after: entry }
    await tell(desk, { event: 'extended', notice, place, reason: extension.reason, personId: author.id, audit })
  })

export const withdrawNotice = (
  parts: NoticeParts,
  office: NoticeOffice,
  change: Change & { reason: string },
): Promise<void> =>
  atNoticeDesk(parts, office, async (desk) => {
    const { notice, place } = await locked(desk, change)
    const { reason, author } = change
    await notice.update(
      {
        ...{ withdrawnAt: desk.now, withdrawnById: author.id, withdrawReason: reason },
        ...{ version: notice.version + 1, updatedAt: desk.now },
      },
      { transaction: desk.transaction },
    )
    const audit = { action: 'notice.withdraw', after: { reason } }
    await tell(desk, { event: 'withdrawn', notice, place, reason, personId: author.id, audit })
  })

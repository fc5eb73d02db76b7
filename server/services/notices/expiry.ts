/** No notice lapses silently: the watch and the lists hear before its end, and again when it has run out and nobody has withdrawn it. */
import { Op } from 'sequelize'
import { Notice, Place } from '../../models/index.ts'
import { replaceFlags } from './acts.ts'
import { atNoticeDesk, tell } from './desk.ts'
import type { NoticeOffice, NoticeParts } from './desk.ts'

type Event = 'expiring' | 'expired' | 'begins'

async function dueOf({ clock }: NoticeParts, { warnMs }: NoticeOffice): Promise<{ id: number; event: Event }[]> {
  const now = clock.now()
  const open = { withdrawnAt: null }
  const [expiring, expired, flags] = await Promise.all([
    Notice.findAll({
      where: { ...open, warnedAt: null, expiresAt: { [Op.gt]: now, [Op.lte]: new Date(now.getTime() + warnMs) } },
    }),
    Notice.findAll({ where: { ...open, expiredToldAt: null, expiresAt: { [Op.lte]: now } } }),
    Notice.findAll({ where: { ...open, kind: 'flag', startsAt: { [Op.lte]: now } }, order: [['startsAt', 'ASC']] }),
  ])
  // Two flags of one beach: the later one was planned and its time has come.
  const begun = flags.filter(
    ({ placeId, id }, n) =>
      !flags.slice(n + 1).some((later) => later.placeId === placeId) &&
      flags.some((other) => other.placeId === placeId && other.id !== id),
  )
  return [
    ...begun.map(({ id }) => ({ id, event: 'begins' as const })),
    ...expiring.map(({ id }) => ({ id, event: 'expiring' as const })),
    ...expired.map(({ id }) => ({ id, event: 'expired' as const })),
  ]
}

/** Answers how many were told of. Each is told once, by a stored time: a stop in between loses none. */
export async function tellOfExpiry(parts: NoticeParts, office: NoticeOffice): Promise<number> {
  let count = 0
  for (const { id, event } of await dueOf(parts, office)) {
    count += await atNoticeDesk(parts, office, async (desk) => {
      const { transaction, now } = desk
      const notice = await Notice.findByPk(id, { lock: true, transaction })
      const place = notice && (await Place.findByPk(notice.placeId, { transaction }))
      if (!notice || !place || notice.withdrawnAt !== null) return 0
      if (event === 'begins') {
        await replaceFlags(desk, notice, null)
        desk.changed.places.add(place.id)
        return 1
      }
      const told = event === 'expiring' ? { warnedAt: now } : { expiredToldAt: now }
      if (event === 'expiring' ? notice.warnedAt : notice.expiredToldAt) return 0
      await notice.update({ ...told, updatedAt: now }, { transaction })
      const audit = { action: `notice.${event}`, after: { expiresAt: notice.expiresAt } }
      await tell(desk, { event, notice, place, reason: notice.reason, personId: null, audit })
      return 1
    })
  }
  return count
}

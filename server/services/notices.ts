/** Flags, closures and advisories at places. */
import { Op } from 'sequelize'
import type { NoticeView } from '../../shared/schemas/placeNotice.ts'
import type { Parts } from '../config/parts.ts'
import { Notice, Place } from '../models/index.ts'
import { presentNotices } from './notices/present.ts'
import { notFound } from './problems.ts'

export { extendNotice, setNotice, withdrawNotice } from './notices/acts.ts'
export type { NoticeAuthor } from './notices/acts.ts'
export type { NoticeOffice } from './notices/desk.ts'
export { tellOfExpiry } from './notices/expiry.ts'

/** In force, to come, or expired and not withdrawn; oldest first, by place. */
export async function openNotices(
  parts: Pick<Parts, 'clock'>,
  placeIds: number[],
  warnMs: number,
): Promise<NoticeView[]> {
  if (placeIds.length === 0) return []
  const rows = await Notice.findAll({ where: { placeId: placeIds, withdrawnAt: null }, order: [['id', 'ASC']] })
  return presentNotices(parts, rows, warnMs)
}

/** Newest first, with those that were withdrawn within so many days. */
export async function listNotices(
  parts: Pick<Parts, 'clock'>,
  placeId: number,
  { days, warnMs }: { days: number; warnMs: number },
): Promise<NoticeView[]> {
  if (!(await Place.findByPk(placeId))) throw notFound('place', placeId)
  const since = new Date(parts.clock.now().getTime() - days * 24 * 3_600_000)
  const where = { placeId, [Op.or]: [{ withdrawnAt: null }, { withdrawnAt: { [Op.gte]: since } }] }
  return presentNotices(parts, await Notice.findAll({ where, order: [['id', 'DESC']] }), warnMs)
}

/** Throws the 404. */
export async function readNotice(parts: Pick<Parts, 'clock'>, noticeId: number, warnMs: number): Promise<NoticeView> {
  const row = await Notice.findByPk(noticeId)
  const [view] = row ? await presentNotices(parts, [row], warnMs) : []
  if (!view) throw notFound('notice', noticeId)
  return view
}

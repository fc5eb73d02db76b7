/** Bulletins: what the sea was measured to do, in words, for many. */
import { Op } from 'sequelize'
import type { BulletinView, PublicBulletin } from '../../shared/schemas/bulletin.ts'
import type { Parts } from '../config/parts.ts'
import { Bulletin } from '../models/index.ts'
import type { BulletinOffice } from './bulletins/office.ts'
import { presentBulletins, publicOf } from './bulletins/present.ts'
import { notFound } from './problems.ts'

export type { BulletinOffice } from './bulletins/office.ts'
export { addDraft, changeDraft, discardDraft } from './bulletins/drafts.ts'
export { noteOverdueBulletins } from './bulletins/due.ts'
export { cancelBulletin, issueBulletin, proofBulletin } from './bulletins/issue.ts'

const aPage = 30

/** Drafts, and issues newest first; `before` is the last id of the page before. */
export async function listBulletins(
  parts: Pick<Parts, 'clock' | 'sequelize'>,
  office: BulletinOffice,
  before: number | null,
): Promise<{ drafts: BulletinView[]; bulletins: BulletinView[]; next: number | null }> {
  const [drafts, rows] = await Promise.all([
    Bulletin.findAll({ where: { status: 'draft' }, order: [['updatedAt', 'DESC']] }),
    Bulletin.findAll({
      where: { status: { [Op.ne]: 'draft' }, ...(before !== null && { id: { [Op.lt]: before } }) },
      order: [['id', 'DESC']],
      limit: aPage + 1,
    }),
  ])
  const page = rows.slice(0, aPage)
  return {
    drafts: before === null ? await presentBulletins(parts, office, drafts) : [],
    bulletins: await presentBulletins(parts, office, page),
    next: rows.length > aPage ? (page.at(-1)?.id ?? null) : null,
  }
}

/** Null: there is none, such as a draft thrown away. */
export async function findBulletin(
  parts: Pick<Parts, 'clock' | 'sequelize'>,
  office: BulletinOffice,
  bulletinId: number,
): Promise<BulletinView | null> {
  const row = await Bulletin.findByPk(bulletinId)
  return row ? ((await presentBulletins(parts, office, [row])).at(0) ?? null) : null
}

/** Throws the 404. */
export async function readBulletin(
  parts: Pick<Parts, 'clock' | 'sequelize'>,
  office: BulletinOffice,
  bulletinId: number,
): Promise<BulletinView> {
  const view = await findBulletin(parts, office, bulletinId)
  if (!view) throw notFound('bulletin', bulletinId)
  return view
}

const publicDays = 2

/** The newest of each chain that is, or was within two days, of interest to the public. */
export async function listPublicBulletins({ clock }: Pick<Parts, 'clock'>): Promise<PublicBulletin[]> {
  const since = new Date(clock.now().getTime() - publicDays * 86_400_000)
  const rows = await Bulletin.findAll({
    where: { status: ['issued', 'cancelled'], validUntil: { [Op.gte]: since } },
    order: [['issuedAt', 'DESC']],
    limit: 10,
  })
  return rows.flatMap(publicOf)
}

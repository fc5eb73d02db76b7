/** Drafts: made, edited by whoever is on watch, thrown away. Nothing of them goes out. */
import type { BulletinDraft, BulletinFigure } from '../../../shared/schemas/bulletin.ts'
import { Bulletin } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { invalidInput } from '../problems.ts'
import { atBulletinDesk, lockBulletin } from './desk.ts'
import type { BulletinChange, BulletinDesk, BulletinParts } from './desk.ts'
import type { BulletinOffice } from './office.ts'

/** Only what is issued can be replaced, and by one draft at a time. */
async function checkReplaced({ transaction }: BulletinDesk, draft: BulletinDraft, ownId: number | null): Promise<void> {
  if (draft.replacesId === null) return
  const replaced = await Bulletin.findByPk(draft.replacesId, { transaction })
  if (replaced?.status !== 'issued') {
    throw invalidInput([
      { path: 'replacesId', message: 'must be a bulletin that is issued and not replaced or cancelled' },
    ])
  }
  const other = await Bulletin.findOne({ where: { replacesId: draft.replacesId, status: 'draft' }, transaction })
  if (other && other.id !== ownId) {
    throw invalidInput([{ path: 'replacesId', message: `is being replaced already by draft ${other.id}` }])
  }
}

/** `figures` as they are now: they are frozen with the draft. */
export const addDraft = (
  parts: BulletinParts,
  office: BulletinOffice,
  { draft, figures, personId }: { draft: BulletinDraft; figures: BulletinFigure[]; personId: number },
): Promise<number> =>
  atBulletinDesk(parts, office, async (desk) => {
    const { transaction, now, changed } = desk
    await checkReplaced(desk, draft, null)
    const stamps = { createdAt: now, updatedAt: now, frozenAt: now }
    const row = {
      status: 'draft' as const,
      draft,
      figures,
      replacesId: draft.replacesId,
      authorId: personId,
      ...stamps,
    }
    const bulletin = await Bulletin.create(row, { transaction })
    const audit = { action: 'bulletin.draft', entity: 'bulletin', entityId: bulletin.id, personId, after: draft }
    await recordAudit(parts, audit, transaction)
    changed.bulletins.add(bulletin.id)
    return bulletin.id
  })

/** `figures`: freezes them again; null keeps what was frozen. */
export const changeDraft = (
  parts: BulletinParts,
  office: BulletinOffice,
  change: BulletinChange & { draft: BulletinDraft; figures: BulletinFigure[] | null },
): Promise<void> =>
  atBulletinDesk(parts, office, async (desk) => {
    const { transaction, now, changed } = desk
    const { draft, figures, personId } = change
    const bulletin = await lockBulletin(desk, change, 'draft')
    await checkReplaced(desk, draft, bulletin.id)
    const before = bulletin.draft
    await bulletin.update(
      {
        ...{ draft, replacesId: draft.replacesId, version: bulletin.version + 1, updatedAt: now },
        ...(figures && { figures, frozenAt: now }),
      },
      { transaction },
    )
    const audit = {
      action: 'bulletin.change',
      entity: 'bulletin',
      entityId: bulletin.id,
      personId,
      before,
      after: draft,
    }
    await recordAudit(parts, audit, transaction)
    changed.bulletins.add(bulletin.id)
  })

export const discardDraft = (parts: BulletinParts, office: BulletinOffice, change: BulletinChange): Promise<void> =>
  atBulletinDesk(parts, office, async (desk) => {
    const bulletin = await lockBulletin(desk, change, 'draft')
    const audit = { action: 'bulletin.discard', entity: 'bulletin', entityId: bulletin.id, personId: change.personId }
    await recordAudit(parts, { ...audit, before: bulletin.draft }, desk.transaction)
    await bulletin.destroy({ transaction: desk.transaction })
    desk.changed.bulletins.add(bulletin.id)
  })

/** What belongs to every change of a bulletin: one transaction, and the news of it after the commit. */
import type { Transaction } from 'sequelize'
import type { Parts } from '../../config/parts.ts'
import { Bulletin } from '../../models/index.ts'
import { changedMeanwhile, notFound, Refused } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import type { BulletinOffice } from './office.ts'
import { presentBulletins } from './present.ts'

export type BulletinParts = Pick<Parts, 'bus' | 'clock' | 'environment' | 'sequelize'>

export interface BulletinDesk {
  parts: BulletinParts
  office: BulletinOffice
  transaction: Transaction
  now: Date
  changed: { bulletins: Set<number>; messages: Set<number> }
}

/** News goes out after commit: an earlier try of the same work leaves none. */
export async function atBulletinDesk<Result>(
  parts: BulletinParts,
  office: BulletinOffice,
  work: (desk: BulletinDesk) => Promise<Result>,
): Promise<Result> {
  const { result, changed } = await inTransaction(parts.sequelize, async (transaction) => {
    const changes = { bulletins: new Set<number>(), messages: new Set<number>() }
    const desk = { parts, office, transaction, now: parts.clock.now(), changed: changes }
    return { result: await work(desk), changed: changes }
  })
  for (const bulletinId of changed.bulletins) parts.bus.publish('bulletin.changed', { bulletinId })
  for (const messageId of changed.messages) parts.bus.publish('message.changed', { messageId, alertId: null })
  return result
}

export interface BulletinChange {
  bulletinId: number
  /** That it was made from. */
  version: number
  personId: number
}

/** Locked for the change. Throws the 404, the 412 with what it is now, and the 409 where its state does not allow it. */
export async function lockBulletin(
  { parts, office, transaction }: BulletinDesk,
  { bulletinId, version }: Pick<BulletinChange, 'bulletinId' | 'version'>,
  allowed: Bulletin['status'],
): Promise<Bulletin> {
  const bulletin = await Bulletin.findByPk(bulletinId, { lock: true, transaction })
  if (!bulletin) throw notFound('bulletin', bulletinId)
  if (bulletin.version !== version) {
    const [current] = await presentBulletins(parts, office, [bulletin])
    throw changedMeanwhile('bulletin', bulletin.version, current)
  }
  if (bulletin.status === allowed) return bulletin
  const detail =
    allowed === 'draft'
      ? 'It was issued and is frozen. Replace it by a new one, or cancel it.'
      : `It is ${bulletin.status === 'draft' ? 'a draft' : bulletin.status}, so it cannot be cancelled or replaced.`
  throw new Refused({ status: 409, code: 'bulletin.wrongState', title: 'Not in this state', detail })
}

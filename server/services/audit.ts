/** Who changed what and when: written in the transaction of the change, sealed afterwards into a chain of hashes. */
import type { Transaction } from 'sequelize'
import type { Parts } from '../config/parts.ts'
import { Audit } from '../models/index.ts'
import { dropAnchor } from './audit/anchors.ts'
import { beginning, sealOf } from './audit/chain.ts'
import { inTransaction } from './transaction.ts'

export interface AuditedChange {
  /** Null: the program itself. */
  personId: number | null
  /** `resource.verb`, such as `stationKey.issue`. */
  action: string
  entity: string
  entityId: string | number
  before?: unknown
  after?: unknown
}

export async function recordAudit(
  { clock }: Pick<Parts, 'clock'>,
  change: AuditedChange,
  transaction: Transaction,
): Promise<void> {
  await Audit.create(
    {
      at: clock.now(),
      personId: change.personId,
      action: change.action,
      entity: change.entity,
      entityId: String(change.entityId),
      before: change.before ?? null,
      after: change.after ?? null,
    },
    { transaction },
  )
}

const rowsASeal = 1000

/** Chains what was committed since the last time; answers how many rows. Only one process runs it. */
export async function sealAudits(parts: Pick<Parts, 'sequelize' | 'clock' | 'environment'>): Promise<number> {
  const { count, number, hash } = await inTransaction(parts.sequelize, async (transaction) => {
    const last = await Audit.findOne({ order: [['sealNumber', 'DESC']], transaction })
    const rows = await Audit.findAll({
      where: { sealNumber: null },
      order: [['id', 'ASC']],
      limit: rowsASeal,
      lock: transaction.LOCK.UPDATE,
      transaction,
    })
    let number = last?.sealNumber ?? 0
    let hash = last?.hash ?? beginning
    for (const row of rows) {
      number += 1
      hash = sealOf(row, number, hash)
      await row.update({ sealNumber: number, hash }, { transaction })
    }
    return { count: rows.length, number, hash }
  })
  if (number > 0) await dropAnchor(parts, number, hash)
  return count
}

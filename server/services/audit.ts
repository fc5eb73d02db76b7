/** Who changed what and when: written in the transaction of the change, sealed afterwards into a chain of hashes. */
import { createHash } from 'node:crypto'
import type { Transaction } from 'sequelize'
import type { Parts } from '../config/parts.ts'
import { Audit } from '../models/index.ts'
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
const beginning = Buffer.alloc(32)

/** The same value gives the same text, whatever the order in which its fields were written. */
function canonical(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonical).join(',')}]`
  if (value === null || typeof value !== 'object') return JSON.stringify(value ?? null)
  const fields = Object.entries(value).sort(([a], [b]) => (a < b ? -1 : 1))
  return `{${fields.map(([name, field]) => `${JSON.stringify(name)}:${canonical(field)}`).join(',')}}`
}

function sealOf(row: Audit, sealNumber: number, previous: Buffer): Buffer {
  const { id, at, personId, action, entity, entityId, before, after } = row
  const content = { sealNumber, id, at: at.toISOString(), personId, action, entity, entityId, before, after }
  return createHash('sha256').update(previous).update(canonical(content)).digest()
}

/** Chains what was committed since the last time; answers how many rows. Only one process runs it. */
export async function sealAudits({ sequelize }: Pick<Parts, 'sequelize'>): Promise<number> {
  return inTransaction(sequelize, async (transaction) => {
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
    return rows.length
  })
}

/** The number of the first seal that does not fit what it seals, or null where the whole chain holds. */
export async function firstBrokenSeal(): Promise<number | null> {
  let previous: Buffer = beginning
  for (let number = 1; ; number += 1) {
    const row = await Audit.findOne({ where: { sealNumber: number } })
    if (!row)
      return (await Audit.max<number | null, Audit>('sealNumber')) === (number === 1 ? null : number - 1)
        ? null
        : number
    if (!row.hash?.equals(sealOf(row, number, previous))) return number
    previous = row.hash
  }
}

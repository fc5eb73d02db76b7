/** How rows of the audit are chained by hashes; and walking the whole chain, oldest first. */
import { createHash } from 'node:crypto'
import { Op } from 'sequelize'
import { Audit } from '../../models/index.ts'

export const beginning = Buffer.alloc(32)

/** The same value gives the same text, whatever the order in which its fields were written. */
function canonical(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonical).join(',')}]`
  if (value === null || typeof value !== 'object') return JSON.stringify(value ?? null)
  const fields = Object.entries(value).sort(([a], [b]) => (a < b ? -1 : 1))
  return `{${fields.map(([name, field]) => `${JSON.stringify(name)}:${canonical(field)}`).join(',')}}`
}

export function sealOf(row: Audit, sealNumber: number, previous: Buffer): Buffer {
  const { id, at, personId, action, entity, entityId, before, after } = row
  const content = { sealNumber, id, at: at.toISOString(), personId, action, entity, entityId, before, after }
  return createHash('sha256').update(previous).update(canonical(content)).digest()
}

export interface Link {
  number: number
  /** As it is stored. */
  hash: Buffer
  /** False: the row is not what was sealed. */
  fits: boolean
}

const atOnce = 1000

/** Every sealed row in the order of its number; numbers that are not there are simply not answered. */
export async function* walkChain(): AsyncGenerator<Link> {
  let previous: Buffer = beginning
  let number = 0
  for (;;) {
    const rows = await Audit.findAll({
      where: { sealNumber: { [Op.gt]: number } },
      order: [['sealNumber', 'ASC']],
      limit: atOnce,
    })
    if (rows.length === 0) return
    for (const row of rows) {
      const next = row.sealNumber ?? 0
      // After a hole the hash before is not known: the row itself is then not judged.
      const isJudged = next === number + 1
      number = next
      const hash = row.hash ?? Buffer.alloc(0)
      yield { number, hash, fits: !isJudged || hash.equals(sealOf(row, number, previous)) }
      previous = hash
    }
  }
}

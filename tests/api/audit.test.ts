import { beforeAll, describe, expect, test } from 'vitest'
import { Audit } from '../../server/models/index.ts'
import { execute } from '../../server/models/sql.ts'
import { firstBrokenSeal, recordAudit, sealAudits } from '../../server/services/audit.ts'
import { inTransaction } from '../../server/services/transaction.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
beforeAll(async () => {
  parts = await testParts()
})

const change = (entityId: number, after: unknown = { limit: 1.5, note: 'größer' }) =>
  inTransaction(parts.sequelize, (transaction) =>
    recordAudit(parts, { personId: null, action: 'limit.change', entity: 'limit', entityId, after }, transaction),
  )

describe('the audit', () => {
  test('of a change that did not happen is not there either', async () => {
    const failed = inTransaction(parts.sequelize, async (transaction) => {
      await recordAudit(parts, { personId: null, action: 'limit.change', entity: 'limit', entityId: 1 }, transaction)
      throw new Error('the change failed')
    })
    await expect(failed).rejects.toThrow('the change failed')
    expect(await Audit.count()).toBe(0)
    expect(await firstBrokenSeal()).toBeNull()
  })

  test('is sealed in one unbroken chain, whatever the pieces in which it is sealed', async () => {
    for (let number = 1; number <= 3; number += 1) await change(number)
    expect(await sealAudits(parts)).toBe(3)
    await change(4, [1, null, { b: 1, a: [] }])
    expect(await sealAudits(parts)).toBe(1)
    expect(await sealAudits(parts)).toBe(0)
    const rows = await Audit.findAll({ order: [['id', 'ASC']] })
    expect(rows.map((row) => row.sealNumber)).toEqual([1, 2, 3, 4])
    expect(await firstBrokenSeal()).toBeNull()
  })

  test('shows where a sealed row was altered', async () => {
    const alter = (after: string) =>
      execute(parts.sequelize, 'UPDATE audits SET `after` = :after WHERE sealNumber = 2', { after })
    await alter('{"limit":2.5,"note":"größer"}')
    expect(await firstBrokenSeal()).toBe(2)
    await alter('{"note":"größer","limit":1.5}')
    expect(await firstBrokenSeal()).toBeNull()
  })

  test('shows where a sealed row was taken away', async () => {
    await execute(parts.sequelize, 'DELETE FROM audits WHERE sealNumber = 3')
    expect(await firstBrokenSeal()).toBe(3)
  })
})

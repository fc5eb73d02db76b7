import { readFile, rm, writeFile } from 'node:fs/promises'
import { beforeAll, beforeEach, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { Audit, LogEntry } from '../../server/models/index.ts'
import { execute } from '../../server/models/sql.ts'
import { recordAudit, sealAudits } from '../../server/services/audit.ts'
import { anchorFile } from '../../server/services/audit/anchors.ts'
import { verifyAudit } from '../../server/services/audit/verify.ts'
import { inTransaction } from '../../server/services/transaction.ts'
import { signedIn } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
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
const sql = (statement: string, values = {}) => execute(parts.sequelize, statement, values)
const faults = async () => (await verifyAudit(parts, null)).faults.map(({ kind, sealNumber }) => [kind, sealNumber])

/** Seven sealed rows, with anchors at the third and the last. */
beforeEach(async () => {
  await sql('DELETE FROM audits')
  await rm(anchorFile(parts), { force: true })
  for (let number = 1; number <= 3; number += 1) await change(number)
  await sealAudits(parts)
  parts.clock.advance(3_601)
  for (let number = 4; number <= 7; number += 1) await change(number)
  await sealAudits(parts)
})

test('the audit of a change that did not happen is not there either', async () => {
  const failed = inTransaction(parts.sequelize, async (transaction) => {
    await recordAudit(parts, { personId: null, action: 'limit.change', entity: 'limit', entityId: 1 }, transaction)
    throw new Error('the change failed')
  })
  await expect(failed).rejects.toThrow('the change failed')
  expect(await Audit.count()).toBe(7)
})

describe('the chain', () => {
  test('holds, whatever the pieces in which it was sealed, and waits with what is not sealed yet', async () => {
    await change(8, [1, null, { b: 1, a: [] }])
    expect(await verifyAudit(parts, null)).toMatchObject({
      isWhole: true,
      faults: [],
      sealedRows: 7,
      waitingRows: 1,
      newestSeal: 7,
      anchors: 2,
      newestAnchor: { sealNumber: 7 },
    })
    parts.clock.advance(601)
    expect(await faults()).toEqual([['unsealed', null]])
    expect(await sealAudits(parts)).toBe(1)
    expect(await faults()).toEqual([])
  })

  test.each([
    ['what was changed', '`after` = \'{"limit":2.5}\''],
    ['who', 'personId = NULL, entityId = 99'],
    ['when', 'at = at + INTERVAL 1 SECOND'],
    ['which', "action = 'limit.add'"],
  ])('does not hold where somebody altered %s', async (_what, assignment) => {
    await sql(`UPDATE audits SET ${assignment} WHERE sealNumber = 2`)
    expect(await faults()).toEqual([['altered', 2]])
  })

  test('holds where only the order of written fields differs', async () => {
    await sql('UPDATE audits SET `after` = \'{"note":"größer","limit":1.5}\' WHERE sealNumber = 2')
    expect(await faults()).toEqual([])
  })

  test.each([
    ['the first', 'sealNumber = 1', [['missing', 1]]],
    ['one in the middle', 'sealNumber = 4', [['missing', 4]]],
    ['the newest', 'sealNumber = 7', [['tailMissing', 7]]],
    ['the newest four', 'sealNumber >= 4', [['tailMissing', 4]]],
    ['all', 'id > 0', [['tailMissing', 1]]],
  ])('does not hold where somebody took away %s', async (_which, where, found) => {
    await sql(`DELETE FROM audits WHERE ${where}`)
    expect(await faults()).toEqual(found)
  })

  test('does not hold where somebody altered a row and sealed all anew', async () => {
    await sql("UPDATE audits SET entityId = '99' WHERE sealNumber = 2")
    await sql('UPDATE audits SET sealNumber = NULL, hash = NULL')
    await sealAudits(parts)
    expect(await faults()).toEqual([
      ['anchorDiffers', 3],
      ['anchorDiffers', 7],
    ])
  })

  test('does not hold where the anchors were forged, shortened in the middle or taken away', async () => {
    const file = anchorFile(parts)
    const lines = (await readFile(file, 'utf8')).trim().split('\n')
    await writeFile(file, `${lines[0]?.replace('"seal":3', '"seal":2')}\n${lines[1]}\n`)
    expect(await faults()).toContainEqual(['anchorForged', null])
    await writeFile(file, `${lines[1]}\n`)
    expect(await faults()).toEqual([['anchorForged', null]])
    await rm(file)
    expect(await faults()).toEqual([['anchorsGone', null]])
  })

  test('that does not hold is said in the watch log', async () => {
    await sql('DELETE FROM audits WHERE sealNumber = 7')
    await verifyAudit(parts, null)
    const [line] = await LogEntry.findAll({ order: [['id', 'DESC']], limit: 1 })
    expect(line?.text).toContain('The audit does not hold: Rows 7 to 7 are gone from the end')
  })
})

describe('an administrator', () => {
  test('filters the audit by who, what and when, page by page, and takes it along as a guarded file', async () => {
    const person = await makePerson(parts.clock, { role: 'admin', name: '=Technician' })
    const browser = await signedIn(createApp(parts), person.email)
    for (let number = 1; number <= 60; number += 1) await change(number, { note: '=1+1', number })
    const first = (await browser.get('/api/audits?entity=limit').expect(200)).body
    expect(first.audits).toHaveLength(50)
    const second = (await browser.get(`/api/audits?entity=limit&before=${first.next}`).expect(200)).body
    expect(second.audits).toHaveLength(17)
    expect(second.next).toBeNull()
    const own = (await browser.get(`/api/audits?personId=${person.id}&action=session.begin`).expect(200)).body
    expect(own).toMatchObject({ total: 1, audits: [{ person: { name: '=Technician' }, entity: 'person' }] })
    const since = new Date(parts.clock.now().getTime() - 60_000).toISOString()
    expect((await browser.get(`/api/audits?personId=0&from=${since}`).expect(200)).body.total).toBe(64)
    await browser.get('/api/audits?from=yesterday').expect(422)
    const choices = (await browser.get('/api/audits/choices').expect(200)).body
    expect(choices).toEqual({
      people: [{ id: person.id, name: '=Technician' }],
      entities: ['limit', 'person'],
      actions: ['limit.change', 'session.begin'],
    })
    const file = await browser.get('/api/audits/file').expect(200)
    expect(file.headers['content-type']).toContain('text/csv')
    expect(file.text.split('\r\n')[0]).toBe('time,person,action,entity,entity_id,seal_number,field,before,after')
    expect(file.text).toContain("'=Technician")
    expect(file.text).toContain("note,,'=1+1")
    expect(file.text).not.toMatch(/,=/)
  })

  test('has the chain looked over, and sees when that was last done and by whom', async () => {
    const person = await makePerson(parts.clock, { role: 'admin' })
    const browser = await signedIn(createApp(parts), person.email)
    await sealAudits(parts)
    const found = (await browser.post('/api/audits/verification').expect(200)).body
    expect(found).toMatchObject({ isWhole: true, person: { id: person.id } })
    expect((await browser.get('/api/audits/verification').expect(200)).body).toEqual({ verification: found })
  })
})

import { beforeAll, describe, expect, test } from 'vitest'
import { Audit, LogEntry, SettingVersion } from '../../server/models/index.ts'
import { changeSetting, publicSettings, settingInForce } from '../../server/services/settings.ts'
import { inTransaction } from '../../server/services/transaction.ts'
import { writeSystemLine } from '../../server/services/watchLog.ts'
import { makePerson } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
beforeAll(async () => {
  parts = await testParts()
})

describe('a setting', () => {
  test('that nobody has set has a value, and no caution is empty or says that something is safe', async () => {
    const { portName, cautions, coast, leadStationId } = await publicSettings(parts)
    expect({ portName, coast, leadStationId }).toEqual({ portName: 'Harbour', coast: null, leadStationId: null })
    for (const caution of Object.values(cautions)) {
      expect(caution.length).toBeGreaterThan(20)
      expect(caution).not.toMatch(/\b(is|are) safe\b/)
    }
  })

  test('that is changed is a new version with its author and reason, and the older one stays as it was', async () => {
    const { id: personId } = await makePerson(parts.clock, { role: 'admin' })
    const by = { personId, reason: 'Named by the harbour board' }
    for (const portName of ['North Quay', 'South Quay']) {
      const content = { portName, timeZone: 'Atlantic/Azores' }
      await inTransaction(parts.sequelize, (transaction) => changeSetting(parts, 'port', content, by, transaction))
    }
    expect((await settingInForce(parts, 'port')).portName).toBe('South Quay')
    const versions = await SettingVersion.findAll({ where: { groupName: 'port' }, order: [['id', 'ASC']] })
    expect(versions.map(({ content, authorId, reason }) => [content.portName, authorId, reason])).toEqual([
      ['North Quay', personId, by.reason],
      ['South Quay', personId, by.reason],
    ])
    const audits = await Audit.findAll({ where: { action: 'setting.change' }, order: [['id', 'ASC']] })
    expect(audits.map(({ before, after }) => [before, after])).toMatchObject([
      [{ portName: 'Harbour' }, { portName: 'North Quay' }],
      [{ portName: 'North Quay' }, { portName: 'South Quay' }],
    ])
  })

  test('that comes into force later is not in force yet', async () => {
    const later = new Date(parts.clock.now().getTime() + 60_000)
    const content = { portName: 'West Quay', timeZone: 'Etc/UTC' }
    await SettingVersion.create({ groupName: 'port', content, validFrom: later, reason: 'From tomorrow' })
    expect((await settingInForce(parts, 'port')).portName).toBe('South Quay')
    parts.clock.advance(60)
    expect((await settingInForce(parts, 'port')).portName).toBe('West Quay')
  })
})

test('a line of the watch log by the program is there with what it tells, or not at all', async () => {
  const line = { kind: 'station', text: 'Outer Ledge is silent since 05:58 UTC.', links: { stationId: 1 } }
  await inTransaction(parts.sequelize, (transaction) => writeSystemLine(parts, line, transaction))
  const failed = inTransaction(parts.sequelize, async (transaction) => {
    await writeSystemLine(parts, { kind: 'station', text: 'Never happened.' }, transaction)
    throw new Error('rolled back')
  })
  await expect(failed).rejects.toThrow('rolled back')
  const rows = await LogEntry.findAll()
  expect(rows.map(({ kind, text, links, personId }) => ({ kind, text, links, personId }))).toEqual([
    { ...line, personId: null },
  ])
})

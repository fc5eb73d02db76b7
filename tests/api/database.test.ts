import { randomBytes } from 'node:crypto'
import { readdir } from 'node:fs/promises'
import { beforeAll, describe, expect, test } from 'vitest'
import type { Sequelize } from 'sequelize'
import { connectDatabase, migrate, pendingMigrations } from '../../server/config/database.ts'
import { up as makePeopleTables } from '../../server/migrations/20261201T0900-people.ts'
import * as models from '../../server/models/index.ts'
import { execute, select } from '../../server/models/sql.ts'
import { createSchema, freshDatabase } from '../support/database.ts'

let sequelize: Sequelize
beforeAll(async () => {
  ;({ sequelize } = await freshDatabase())
})

const migrationNames = async () =>
  (await readdir(new URL('../../server/migrations/', import.meta.url))).filter((name) => name.endsWith('.ts'))

const at = new Date('2026-03-29T01:30:00.123Z')

describe('the schema', () => {
  test('migrating a migrated schema does nothing', async () => {
    expect(await pendingMigrations(sequelize)).toEqual([])
    expect(await migrate(sequelize)).toEqual([])
  })

  test('half made when a migration was stopped is completed by the next start', async () => {
    const half = connectDatabase({ url: await createSchema() })
    await makePeopleTables(half)
    await expect(migrate(half)).resolves.toHaveLength((await migrationNames()).length)
    expect(await pendingMigrations(half)).toEqual([])
    await half.close()
  })

  test('every model names the columns its table has, and no other', async () => {
    for (const [name, model] of Object.entries(sequelize.models)) {
      if (name === 'migration') continue
      const rows = await select<{ Field: string }>(sequelize, `SHOW COLUMNS FROM \`${String(model.getTableName())}\``)
      const columns = rows.map((row) => row.Field).sort()
      expect([name, ...columns]).toEqual([name, ...Object.keys(model.getAttributes()).sort()])
    }
  })

  test('the partitioned tables have the time column in every key', async () => {
    const rows = await select<{ name: string }>(
      sequelize,
      `SELECT DISTINCT TABLE_NAME AS name FROM information_schema.PARTITIONS
       WHERE TABLE_SCHEMA = DATABASE() AND PARTITION_NAME IS NOT NULL ORDER BY name`,
    )
    expect(rows.map((row) => row.name)).toEqual([
      'estimateDetails',
      'estimates',
      'outlooks',
      'readingBlocks',
      'stationHealthHours',
    ])
  })
})

describe('values through the database', () => {
  test('a time keeps its milliseconds in a model, in a named value and in a raw row', async () => {
    await models.Watermark.create({ job: 'a', subjectKind: 'station', subjectId: 1, doneUpTo: at, updatedAt: at })
    await execute(
      sequelize,
      `INSERT INTO watermarks (job, subjectKind, subjectId, doneUpTo, updatedAt) VALUES (:job, 'station', 2, :at, :at)`,
      { job: 'a', at },
    )
    const rows = await select<{ doneUpTo: Date }>(sequelize, 'SELECT doneUpTo FROM watermarks WHERE doneUpTo = :at', {
      at,
    })
    expect(rows).toEqual([{ doneUpTo: at }, { doneUpTo: at }])
  })

  test('bytes come back as they were, from a model and from a raw row', async () => {
    const payload = randomBytes(5000)
    const digest = randomBytes(32)
    const row = { stationId: 1, streamId: 1, seq: 7, startsAt: at, arrivedAt: at, sentAt: at, commitId: 1 }
    await models.Frame.create({ ...row, sampleRate: 4, sampleCount: 20, digest, payload })
    const frame = await models.Frame.findOne({ where: { digest } })
    expect(frame?.payload.equals(payload) && frame.digest.equals(digest)).toBe(true)
    expect(frame?.seq).toBe(7)
    const [raw] = await select<{ payload: Buffer; digest: Buffer }>(sequelize, 'SELECT payload, digest FROM frames')
    expect(raw?.payload.equals(payload) && raw.digest.equals(digest)).toBe(true)
  })

  test('rows really inserted are told from repeated ones', async () => {
    const insert = (rows: (string | number)[][]) =>
      select<{ subjectId: number }>(
        sequelize,
        `INSERT IGNORE INTO watermarks (job, subjectKind, subjectId, updatedAt)
         VALUES ${rows.map((_, index) => `(:${'r' + index}, '2026-01-01')`).join(', ')} RETURNING subjectId`,
        Object.fromEntries(rows.map((row, index) => ['r' + index, row])),
      )
    await insert([['b', 'station', 1]])
    expect(
      await insert([
        ['b', 'station', 1],
        ['b', 'station', 2],
      ]),
    ).toEqual([{ subjectId: 2 }])
  })

  test('JSON comes back as the value it was', async () => {
    const content = { portName: 'Åbo', nested: [1, null, { deep: true }] }
    const made = await models.SettingVersion.create({ groupName: 'port', content, validFrom: at, reason: 'test' })
    const found = await models.SettingVersion.findByPk(made.id)
    expect(found?.content).toEqual(content)
  })

  test('numbers of group commits rise', async () => {
    const next = async () => (await select<{ id: number }>(sequelize, 'SELECT NEXTVAL(commitIds) AS id'))[0]?.id ?? 0
    const first = await next()
    expect(await next()).toBeGreaterThan(first)
  })
})

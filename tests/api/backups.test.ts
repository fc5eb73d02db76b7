import { readdir, readFile, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { beforeAll, describe, expect, test } from 'vitest'
import { Audit, BackupRun, LogEntry, Person } from '../../server/models/index.ts'
import { execute, select } from '../../server/models/sql.ts'
import { backUp, newestManifest, restoreInto, rowsIn, tryRestore } from '../../server/services/backups.ts'
import { recordAudit, sealAudits } from '../../server/services/audit.ts'
import { inTransaction } from '../../server/services/transaction.ts'
import { createSchema } from '../support/database.ts'
import { makePerson, makeStation } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let folder: string
beforeAll(async () => {
  parts = await testParts()
  folder = join(parts.environment.dataFolder, 'backups')
  await makePerson(parts.clock, { name: 'Größe, "quoted"\nand broken; (1),(2)' })
  await makeStation(parts.clock)
  await inTransaction(parts.sequelize, (transaction) =>
    recordAudit(
      parts,
      { personId: null, action: 'test.add', entity: 'test', entityId: 1, after: { a: '),(' } },
      transaction,
    ),
  )
  await sealAudits(parts)
})

describe('a backup', () => {
  test('restored into an empty database is the same in every table, and is recorded', async () => {
    const { path, manifest } = await backUp(parts, folder)
    expect(await newestManifest(folder)).toBe(path)
    expect(manifest.tables.people?.rows).toBe(await Person.count())
    expect(manifest.tables.sensors?.rows).toBe(3)
    expect(manifest.files.map((file) => file.path)).toEqual(['audit-anchors'])
    const url = await createSchema()
    const { differences } = await restoreInto(path, url)
    expect(differences).toEqual([])
    const schema = new URL(url).pathname.slice(1)
    const names = await select<{ name: string }>(parts.sequelize, `SELECT name FROM \`${schema}\`.people`)
    expect(names).toEqual([{ name: 'Größe, "quoted"\nand broken; (1),(2)' }])
    await expect(restoreInto(path, url)).rejects.toThrow('already holds tables')
    await execute(parts.sequelize, `DROP DATABASE \`${schema}\``)
    const [run] = await BackupRun.findAll()
    expect(run).toMatchObject({ kind: 'backup', isGood: true, rows: rowsIn(manifest), bytes: manifest.bytes })
    expect(await Audit.count({ where: { action: 'backup.succeed' } })).toBe(1)
  })

  test('is tried in a scratch database that goes afterwards, while rows come in', async () => {
    const { path } = await backUp(parts, folder)
    await makePerson(parts.clock)
    const { differences } = await tryRestore(parts, path)
    expect(differences).toEqual([])
    const left = await select<{ name: string }>(
      parts.sequelize,
      "SELECT SCHEMA_NAME AS name FROM information_schema.SCHEMATA WHERE SCHEMA_NAME LIKE '%restore_test'",
    )
    expect(left).toEqual([])
    expect(await BackupRun.count({ where: { kind: 'restoreTest', isGood: true } })).toBe(1)
  })

  test('that was altered is refused, and the failure stands in the watch log', async () => {
    const { path, manifest } = await backUp(parts, folder)
    const dump = join(folder, manifest.file)
    const bytes = await readFile(dump)
    bytes[bytes.length - 9] = (bytes.at(-9) ?? 0) ^ 1
    await writeFile(dump, bytes)
    await expect(tryRestore(parts, path)).rejects.toThrow('its checksum differs')
    const [line] = await LogEntry.findAll({ order: [['id', 'DESC']], limit: 1 })
    expect(line?.text).toContain('A restore was tried and failed')
    await expect(tryRestore(parts, join(folder, 'none.manifest.json'))).rejects.toThrow('cannot be read')
  })

  test('into a folder that cannot be written says so and leaves nothing behind', async () => {
    const file = join(parts.environment.dataFolder, 'a-file')
    await writeFile(file, '')
    await expect(backUp(parts, join(file, 'backups'))).rejects.toThrow('cannot be made or written')
    expect(await BackupRun.count({ where: { kind: 'backup', isGood: false } })).toBe(1)
    expect((await readdir(folder)).filter((name) => name.endsWith('.part'))).toEqual([])
  })
})

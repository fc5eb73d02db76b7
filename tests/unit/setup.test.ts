import { mkdir, mkdtemp, readFile, rm, stat, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, test } from 'vitest'
import { checkNode } from '../../server/setup/checkNode.mjs'
import { makeSecret } from '../../server/setup/databaseFolder.mjs'
import { peopleLines } from '../../server/setup/demonstrationPeople.ts'
import { packagesAreAsLocked } from '../../server/setup/npmPackages.mjs'
import { sentenceFor } from '../../server/setup/plainFailure.mjs'
import { pidInFile } from '../../server/setup/processLikeness.mjs'
import { readStartSettings } from '../../server/setup/startSettings.ts'
import { tallyVitest } from '../../server/setup/testReports.ts'
import { sentencesOf } from '../../server/setup/waitForPage.ts'

let folder: string
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'offing-setup-'))
})
afterEach(() => rm(folder, { recursive: true }))

describe('settings of a start', () => {
  const secret = 'Vd0q-2mJr_8sYkT4hZb7LxWn9cEu3PaG5fRiKoNe1QwM'

  test('an address that is not loopback is refused and the way to real use named', () => {
    for (const HOST of ['0.0.0.0', '192.0.2.7', '::']) {
      expect(() => readStartSettings({ HOST, JWT_SECRET: secret }, folder, 'unused')).toThrow(
        /loopback only.*npm run serve/,
      )
    }
  })

  test('an empty environment gives a demonstration with a database and a mail catcher of its own', () => {
    const settings = readStartSettings({ JWT_SECRET: secret }, folder, 'unused')
    expect(settings).toMatchObject({ ownDatabase: true, ownMailCatcher: true, scenario: 'demonstration' })
    expect(settings.environment).toMatchObject({
      installationKind: 'demonstration',
      host: '127.0.0.1',
      dataFolder: folder,
    })
  })

  test('a given database and mail server take the place of our own', () => {
    const given = {
      DATABASE_URL: 'mariadb://o:p@127.0.0.1/offing',
      SMTP_URL: 'smtp://127.0.0.1:2525',
      JWT_SECRET: secret,
    }
    expect(readStartSettings(given, folder, 'unused')).toMatchObject({ ownDatabase: false, ownMailCatcher: false })
  })

  test('several faults are said at once', () => {
    const given = { PORT: 'many', LOG_LEVEL: 'loud', JWT_SECRET: secret }
    expect(() => readStartSettings(given, folder, 'unused')).toThrow(/PORT[\s\S]*LOG_LEVEL/)
  })
})

describe('what a person is told', () => {
  test('a full disk, a missing right and a read-only folder each have their sentence, an unforeseen error none', () => {
    const failure = (code: string) => sentenceFor(Object.assign(new Error(code), { code, path: '/srv/offing' }))
    expect(failure('ENOSPC')).toMatch(/^The disk is full \(\/srv\/offing\)/)
    expect(failure('EACCES')).toMatch(/^A right is missing \(\/srv\/offing\)/)
    expect(failure('EROFS')).toMatch(/^The folder is read-only \(\/srv\/offing\)/)
    expect(failure('EWEIRD')).toBeNull()
  })

  test('Node older than 20.19 is refused with both versions', () => {
    expect(() => checkNode('18.20.4')).toThrow(/20\.19.*18\.20\.4/)
    expect(() => checkNode('20.18.1')).toThrow()
    expect(() => checkNode('20.20.2')).not.toThrow()
  })

  test('of a log of JSON lines only the faults are told, of plain lines all but the stack', () => {
    const log = [
      '{"level":"info","msg":"listening"}',
      '{"level":"fatal","msg":"The database holds a real installation."}',
      'Plain words',
      '    at main (server/index.ts:1:1)',
    ].join('\n')
    expect(sentencesOf(log)).toBe('The database holds a real installation.\nPlain words')
  })

  test('people stand in columns: e-mail, password, role', () => {
    const lines = peopleLines([
      { email: 'a@marrowick.example', password: 'one two', role: 'admin' },
      { email: 'operator@marrowick.example', password: 'three', role: 'operator' },
    ])
    expect(lines).toEqual([
      '  a@marrowick.example         one two  admin',
      '  operator@marrowick.example  three    operator',
    ])
  })
})

describe('secrets', () => {
  test('a secret is made once, for the eyes of its owner alone', async () => {
    const path = join(folder, 'secret')
    const first = await makeSecret(path)
    expect(first.length).toBeGreaterThanOrEqual(43)
    expect(await makeSecret(path)).toBe(first)
    expect((await stat(path)).mode & 0o777).toBe(0o600)
    expect((await readFile(path, 'utf8')).trim()).toBe(first)
  })
})

describe('packages', () => {
  const put = async (name: string, packages: object) => {
    await writeFile(join(folder, name), JSON.stringify({ packages }))
  }
  const lock = (packages: object) => put('package-lock.json', { '': {}, ...packages })

  test('installed packages count only when every one that is not optional has the locked version', async () => {
    await mkdir(join(folder, 'node_modules'))
    const installed = { 'node_modules/zod': { version: '4.6.7' } }
    await put('node_modules/.package-lock.json', installed)
    await lock({ ...installed, 'node_modules/other-machine': { version: '1.0.0', optional: true } })
    expect(await packagesAreAsLocked(folder)).toBe(true)
    await lock({ 'node_modules/zod': { version: '4.6.8' } })
    expect(await packagesAreAsLocked(folder)).toBe(false)
    await lock({ ...installed, 'node_modules/ws': { version: '8.23.0' } })
    expect(await packagesAreAsLocked(folder)).toBe(false)
  })

  test('a folder without installed packages is not as locked', async () => {
    await lock({})
    expect(await packagesAreAsLocked(folder)).toBe(false)
  })
})

describe('pid files', () => {
  test('the pid of a living process of another kind is not taken for ours', async () => {
    const path = join(folder, 'server.pid')
    await writeFile(path, `${process.ppid}\n`)
    expect(await pidInFile(path, { argument: 'server/of-another-kind.ts' })).toBeNull()
  })

  test('a file with nonsense, with init or without content names nobody', async () => {
    const path = join(folder, 'server.pid')
    for (const text of ['', 'none', '1', '-4']) {
      await writeFile(path, text)
      expect(await pidInFile(path, { argument: '' })).toBeNull()
    }
  })
})

describe('sums of a test report', () => {
  const file = (status: string, tests: number) => ({
    status,
    assertionResults: Array.from({ length: tests }, () => ({})),
  })

  test('a skipped test, a file that cannot be loaded and a run without tests all count as failed', () => {
    expect(tallyVitest({ numPassedTests: 5, numTotalTests: 6, testResults: [file('passed', 6)] })).toEqual({
      passed: 5,
      failed: 1,
    })
    expect(
      tallyVitest({ numPassedTests: 2, numTotalTests: 2, testResults: [file('passed', 2), file('failed', 0)] }),
    ).toEqual({
      passed: 2,
      failed: 1,
    })
    expect(tallyVitest({ numPassedTests: 0, numTotalTests: 0, testResults: [] })).toEqual({ passed: 0, failed: 1 })
  })
})

import { readFile, stat } from 'node:fs/promises'
import type { Express } from 'express'
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { Audit, Person } from '../../server/models/index.ts'
import { offerSetUp } from '../../server/services/people/setUp.ts'
import { openBrowser, signedIn } from '../support/browser.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let app: Express
beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
})

const password = 'four oars on a grey boat'
const complete = (token: string, changed: Record<string, string> = {}) =>
  openBrowser(app)
    .post('/api/setup')
    .send({ token, name: 'Ada Quayle', email: 'Ada@harbour.example', password, ...changed })
const tokenIn = async (file: string | null): Promise<string> => (await readFile(file ?? '', 'utf8')).trim()
const needsSetUp = async () => (await openBrowser(app).get('/api/installation')).body.needsSetUp

describe('the set-up token', () => {
  test('lies in a file for the eyes of the server alone, and an older one is worthless', async () => {
    const old = await tokenIn(await offerSetUp(parts))
    const file = await offerSetUp(parts)
    expect((await stat(file ?? '')).mode & 0o777).toBe(0o600)
    expect(await needsSetUp()).toBe(true)
    expect((await complete(old).expect(403)).body.code).toBe('setUp.wrongToken')
    expect(parts.log.join()).not.toContain(await tokenIn(file))
  })

  test('is worthless after a day', async () => {
    const token = await tokenIn(await offerSetUp(parts))
    parts.clock.advance(24 * 3600)
    await complete(token).expect(403)
  })

  test('is not used up by a password that is refused with its reason', async () => {
    const token = await tokenIn(await offerSetUp(parts))
    const reasonFor = async (refused: string) =>
      (await complete(token, { password: refused }).expect(422)).body.errors[0]
    expect(await reasonFor('Password2026!')).toEqual({ path: 'password', message: 'This is a commonly used password.' })
    expect((await reasonFor('abababababab')).path).toBe('password')
    expect((await reasonFor('ö'.repeat(37) + 'q')).message).toBe('Use at most 72 bytes.')
    expect(await Person.count()).toBe(0)
  })

  test('makes one administrator though it is used by two at once, and none afterwards', async () => {
    const file = await offerSetUp(parts)
    const token = await tokenIn(file)
    const answers = await Promise.all([complete(token), complete(token, { email: 'other@harbour.example' })])
    expect(answers.map(({ status }) => status).sort()).toEqual([204, 403])
    await complete(token, { email: 'third@harbour.example' }).expect(403)
    expect(await Person.count()).toBe(1)
    expect(await needsSetUp()).toBe(false)
    expect(await offerSetUp(parts)).toBeNull()
    await expect(stat(file ?? '')).rejects.toThrow('ENOENT')
    const [person] = await Person.findAll()
    expect(person?.role).toBe('admin')
    await signedIn(app, person?.email?.toUpperCase() ?? null, password)
    expect((await Audit.findAll()).map((row) => row.action)).toEqual(['person.add', 'session.begin'])
  })
})

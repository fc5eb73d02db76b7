import type { Express } from 'express'
import { beforeEach, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { HandOver, LimitState, LogEntry, Watch } from '../../server/models/index.ts'
import { makeLimit, raiseAlert } from '../support/alerts.ts'
import { signedIn } from '../support/browser.ts'
import { makePerson, usualPassword } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let app: Express

beforeEach(async () => {
  if (!app) {
    parts = await testParts()
    app = createApp(parts)
  }
  // Each test begins with nobody on watch.
  await LimitState.update({ state: 'normal', isActive: false }, { where: {} })
  await HandOver.destroy({ where: {} })
  await Watch.destroy({ where: {} })
})

async function operator(name: string) {
  const person = await makePerson(parts.clock, { role: 'operator', name })
  return { person, browser: await signedIn(app, person.email) }
}

/** Raised and not acknowledged, as judging leaves it. */
async function openAlert() {
  const version = await makeLimit(parts, { steps: [] })
  const now = parts.clock.now()
  const track = { activeSince: now, crossedAt: now, pendingSince: null, lastKnownAt: now, lastWindowEndsAt: now }
  const value = { lastRevision: 1, value: 2.61, valueSd: 0.14, notJudged: null }
  const state = { state: 'unacknowledgedActive' as const, since: now, isActive: true }
  await LimitState.create({ limitId: version.limitId, ...state, ...track, ...value })
  return raiseAlert(parts, version)
}

const newestLine = async (): Promise<string> =>
  (await LogEntry.findOne({ where: { kind: 'watch' }, order: [['id', 'DESC']], rejectOnEmpty: true })).text

describe('a watch', () => {
  test('begins where nobody is on watch, once, and shows to everybody who signs in', async () => {
    const [one, other] = [await operator('A-1'), await operator('B-2')]
    const begun = await one.browser.post('/api/watches').send({ name: 'A' }).expect(201)
    expect(begun.body.watch).toMatchObject({ name: 'A', person: { name: 'A-1' }, endedAt: null })
    const { body } = await other.browser.post('/api/watches').send({}).expect(409)
    expect(body.detail).toContain('A-1 is on watch')
    const partner = await makePerson(parts.clock, { role: 'partner' })
    const seen = await (await signedIn(app, partner.email)).get('/api/watches/now').expect(200)
    expect(seen.body.watch.person.name).toBe('A-1')
    expect(await newestLine()).toBe('Watch A, A-1: watch begun. Nobody was on watch before.')
  })

  test('of two who begin at the same moment only one stands', async () => {
    const [one, other] = [await operator('A-1'), await operator('B-2')]
    const answers = await Promise.all([one, other].map(({ browser }) => browser.post('/api/watches').send({})))
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409])
    expect(await Watch.count({ where: { endedAt: null } })).toBe(1)
  })
})

describe('a hand-over', () => {
  test('needs a note to each open item and the passphrase of the relief; then both have signed', async () => {
    const [one, relief] = [await operator('A-1'), await operator('B-2')]
    const alert = await openAlert()
    await one.browser.post('/api/watches').send({ name: 'A' }).expect(201)
    const sheet = await one.browser.get('/api/handOvers/sheet').expect(200)
    const key = `alert:${alert.id}`
    expect(sheet.body.carried).toMatchObject([{ key, kind: 'alert', state: 'active, not acknowledged', note: '' }])
    const signing = { relief: { email: relief.person.email, password: usualPassword }, name: 'B', sound: 'on' }
    const early = await one.browser.post('/api/handOvers').send(signing).expect(422)
    expect(early.body.errors[0].path).toBe(`notes.${key}`)
    const notes = { notes: { [key]: 'Pilots told at 05:50' }, expected: 'Swell still building' }
    await relief.browser.put('/api/handOvers/notes').send(notes).expect(409)
    await one.browser.put('/api/handOvers/notes').send(notes).expect(200)
    const wrong = { ...signing, relief: { email: relief.person.email, password: 'not the passphrase' } }
    const refused = await one.browser.post('/api/handOvers').send(wrong).expect(422)
    expect(refused.body.errors[0].path).toBe('relief.password')
    const own = { ...signing, relief: { email: one.person.email, password: usualPassword } }
    await one.browser.post('/api/handOvers').send(own).expect(422)
    const { body } = await one.browser.post('/api/handOvers').send(signing).expect(201)
    expect(body.watch).toMatchObject({ name: 'B', person: { name: 'B-2' } })
    expect(body.handOver).toMatchObject({
      from: { person: { name: 'A-1' } },
      owed: [],
      sheet: { expected: notes.expected },
    })
    expect(await newestLine()).toContain('Watch B, B-2: watch taken over from Watch A, A-1. 1 item read and understood. Sound on. Both signed.') // prettier-ignore
    await one.browser.post('/api/handOvers').send(signing).expect(409)
  })

  test('at once leaves the notes owed, shown until they are written by who owes them', async () => {
    const [one, relief] = [await operator('A-1'), await operator('B-2')]
    const alert = await openAlert()
    await one.browser.post('/api/watches').send({}).expect(201)
    await relief.browser.post('/api/handOvers/takeOver').send({ reason: '' }).expect(422)
    const taken = await relief.browser
      .post('/api/handOvers/takeOver')
      .send({ reason: 'Officer called to the breakwater' })
      .expect(201)
    const [owed] = taken.body.owed
    expect(taken.body.watch.person.name).toBe('B-2')
    expect(owed.owed.map(({ key }: { key: string }) => key)).toContain(`alert:${alert.id}`)
    expect(await newestLine()).toMatch(/B-2: taken over at once from A-1\. Officer called .* owed by A-1\./)
    const path = `/api/handOvers/${owed.id}/owed`
    const notes = Object.fromEntries(owed.owed.map(({ key }: { key: string }) => [key, 'Told by telephone']))
    await relief.browser.post(path).send({ notes }).expect(403)
    const written = await one.browser.post(path).send({ notes }).expect(200)
    expect(written.body.owed).toEqual([])
    expect(await newestLine()).toContain('None is owed any more; signed.')
  })

  test('of a watch that ends with nobody to follow is a line of the log', async () => {
    const { browser } = await operator('A-1')
    await browser.post('/api/watches').send({}).expect(201)
    const { body } = await browser.post('/api/watches/end').send({ reason: 'Port closed for the night' }).expect(200)
    expect(body.watch).toBeNull()
    expect(await newestLine()).toBe('A-1: watch ended, nobody takes over. Port closed for the night')
    const all = await browser.get('/api/watches').expect(200)
    expect(all.body).toMatchObject({ watches: [{ person: { name: 'A-1' } }], next: null })
    const older = await browser.get(`/api/watches?before=${all.body.watches[0].id}`).expect(200)
    expect(older.body.watches).toEqual([])
  })
})

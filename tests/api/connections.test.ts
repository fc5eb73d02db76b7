/** What an administrator is shown while a station is brought up: who tries to connect, how far it comes, what is wrong. */
import { randomUUID } from 'node:crypto'
import type { Express } from 'express'
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import type { ConnectionAttempt } from '../../shared/schemas/stationSetUpLink.ts'
import { signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson, makeStation } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { draftContent, draftSensor, settingsContent } from '../support/stationSetUp.ts'
import { frameOf, helloOf, openLink, serveTelemetry } from '../support/telemetry.ts'
import type { TelemetryServer } from '../support/telemetry.ts'

const six = new Date('2026-12-01T06:00:00Z')
const at = (seconds: number): Date => new Date(six.getTime() + seconds * 1000)
let parts: TestParts
let app: Express
let browser: Browser
let server: TelemetryServer
let made: StationMade
let key: string

beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
  browser = await signedIn(app, (await makePerson(parts.clock, { role: 'admin' })).email)
  server = await serveTelemetry(parts)
})
afterAll(() => server.stop())
beforeEach(async () => {
  parts.clock.set(six)
  made = await makeStation(parts.clock)
  key = (await browser.post(`${path()}/keys`).send({ validUntil: null }).expect(201)).body.key
})

const path = () => `/api/stations/${made.station.id}`
const newest = async (where = `${path()}/connections`): Promise<ConnectionAttempt> => (await browser.get(where).expect(200)).body[0] // prettier-ignore
const hello = (more: object = {}) => ({ ...helloOf(made, { stream: randomUUID(), sentAt: six }), ...more })

async function connect(more: object = {}) {
  const link = await openLink(server.url, key)
  link.send(hello(more))
  return link
}

describe('an attempt to connect', () => {
  test.each<[string, string | null, RegExp]>([
    ['missing', null, /sent no key/],
    ['unknown', 'nonsense12.secret', /not known here/],
  ])('with a key that is %s stands among all attempts with what to do', async (keyState, sent, trouble) => {
    await (
      await openLink(server.url, sent)
    ).closed
    const attempt = await newest('/api/connections')
    expect(attempt).toMatchObject({ keyState, stationId: null, closeCode: 4401, reached: 'opened' })
    expect(attempt.trouble).toMatch(trouble)
    expect(await newest()).toBeUndefined()
  })

  test('with a key that was revoked stands at its station', async () => {
    const [{ id }] = (await browser.get(`${path()}/keys`)).body
    await browser.post(`${path()}/keys/${id}/revoke`).expect(200)
    await (
      await openLink(server.url, key)
    ).closed
    expect(await newest()).toMatchObject({ keyState: 'revoked', trouble: expect.stringMatching(/Issue a new one/) })
  })

  test('whose hello does not fit is told every difference, not the first alone', async () => {
    const [one, two, three] = hello().sensors
    const link = await connect({ sampleRate: 2, sensors: [{ ...one, kind: 'surface', unit: 'm' }, two, { ...three, id: 'Q' }] }) // prettier-ignore
    expect((await link.closed).code).toBe(4409)
    const attempt = await newest()
    expect(attempt).toMatchObject({ reached: 'keyAccepted', closeCode: 4409 })
    expect(attempt.differences).toEqual([
      'sample rate 2 Hz, deployed 4 Hz',
      `deployed but not named: ${three?.id}`,
      `${one?.id} is surface, deployed pressure`,
      'named but not deployed: Q',
    ])
    expect(attempt.trouble).toMatch(/another array than the one in force/)
  })

  test('that streams shows its newest values, and its refusals with their count', async () => {
    const link = await connect()
    await link.next('welcome')
    link.send(frameOf(made, { seq: 1, start: at(-2) }))
    await link.acknowledged(1)
    expect(await newest()).toMatchObject({ reached: 'streaming', frames: 1, acknowledged: 1, trouble: null })
    expect((await newest()).lastFrame).toMatchObject({ seq: 1, values: [{ sensor: made.sensors[0]?.letter }, {}, {}] })
    link.send(frameOf(made, { seq: 2, start: at(600) }))
    await link.next('refused')
    const { refusals } = await newest()
    expect(refusals).toEqual([{ code: 'future', count: 1, detail: expect.stringMatching(/ahead/) }])
    await link.close()
  })

  test('of a station whose clock is off says by how much and which way', async () => {
    const link = await connect({ sentAt: at(-7).toISOString() })
    await link.next('welcome')
    expect((await newest()).trouble).toMatch(/^Its clock is 7\.0 s behind the server's/)
    await link.close()
  })

  test('is no business of an operator', async () => {
    const operator = await signedIn(app, (await makePerson(parts.clock, { role: 'operator' })).email)
    await operator.get(`${path()}/connections`).expect(403)
    await operator.get(`${path()}/link`).expect(200)
  })
})

describe('a running station', () => {
  test('hears of its retirement at once: 4403', async () => {
    const link = await connect()
    await link.next('welcome')
    await browser.post(`${path()}/retire`).set('If-Match', '"1"').send({ reason: 'Out of the water' }).expect(200)
    expect((await link.closed).code).toBe(4403)
  })

  test('goes on over a new survey of the same sensors, and is told the difference where one is added', async () => {
    const link = await connect()
    await link.next('welcome')
    const drafts = `${path()}/deploymentDrafts`
    const same = made.sensors.map(({ letter, east, north }, n) => ({ ...draftSensor(letter, east + 0.02, north), serial: `${made.station.code}-${4100 + n}`, kind: 'pressure' as const })) // prettier-ignore
    async function inForce(sensors: typeof same, seconds: number) {
      parts.clock.set(at(seconds))
      const content = draftContent({ waterDepth: 12, levelOfBed: -12, sensors })
      const draft = (await browser.post(drafts).send({ basedOnId: null, correctsId: null, content }).expect(201)).body
      const open = (await browser.get(`${drafts}/${draft.id}/designCheck`).expect(200)).body.findings
      const resolved = open.filter(({ quality }: { quality: string }) => quality !== 'good').map(({ check }: { check: string }) => ({ check, reason: 'For a test' })) // prettier-ignore
      const order = { validFrom: null, reason: 'Surveyed again', resolved }
      await browser.post(`${drafts}/${draft.id}/putInForce`).set('If-Match', '"1"').send(order).expect(201)
    }
    await inForce(same, 60)
    link.send(frameOf(made, { seq: 1, start: at(58) }))
    await link.acknowledged(1)
    await inForce([...same, { ...draftSensor('D9', 5, -20), kind: 'pressure' as const }], 120)
    expect(await link.closed).toEqual({ code: 4409, reason: 'deployed but not named: D9' })
  })

  test('hears of a new sample rate: 4409 with the difference', async () => {
    const link = await connect()
    await link.next('welcome')
    const order = { sampleRate: 2, content: settingsContent, validFrom: null, reason: 'New loggers' }
    await browser.post(`${path()}/settings`).set('If-Match', '"1"').send(order).expect(201)
    expect(await link.closed).toEqual({ code: 4409, reason: 'sample rate 4 Hz, deployed 2 Hz' })
  })
})

describe('keys', () => {
  test('that are rotated go on for the overlap and then close what they opened', async () => {
    const { body } = await browser.post(`${path()}/keys/rotate`).send({ overlapMinutes: 60 }).expect(201)
    const keys = (await browser.get(`${path()}/keys`)).body
    expect(keys.map(({ validUntil }: { validUntil: string | null }) => validUntil)).toEqual([at(3600).toISOString(), null]) // prettier-ignore
    await (await connect()).next('welcome')
    parts.clock.set(at(3601))
    await (
      await openLink(server.url, key)
    ).closed
    expect(await newest()).toMatchObject({ keyState: 'expired' })
    const link = await openLink(server.url, body.key)
    link.send(hello({ sentAt: at(3601).toISOString() }))
    await link.next('welcome')
    await link.close()
  })

  test('that are rotated without an overlap close what they opened at once', async () => {
    const link = await connect()
    await link.next('welcome')
    await browser.post(`${path()}/keys/rotate`).send({ overlapMinutes: 0 }).expect(201)
    expect((await link.closed).code).toBe(4401)
  })
})

describe('the register of sensors', () => {
  test('keeps due dates from their version and clock offsets with their dates', async () => {
    const list = async () => (await browser.get(`${path()}/sensors`).expect(200)).body
    const [sensor] = await list()
    expect(sensor).toMatchObject({
      version: 1,
      letter: made.sensors[0]?.letter,
      calibrationDue: null,
      clockOffsets: [],
    })
    const change = { serial: sensor.serial, calibrationDue: '2027-05-01', cleaningDue: null, reason: 'Calibrated' }
    const one = `${path()}/sensors/${sensor.id}`
    await browser.put(one).send(change).expect(428)
    await browser.put(one).set('If-Match', '"1"').send(change).expect(200)
    expect((await browser.put(one).set('If-Match', '"1"').send(change).expect(412)).body.current.version).toBe(2)
    const taken = { ...change, serial: (await list())[1].serial }
    await browser.put(one).set('If-Match', '"2"').send(taken).expect(422)
    const offset = { offsetSeconds: 0.12, sd: 0.01, reason: 'Compared on the bench' }
    await browser
      .post(`${one}/clockOffsets`)
      .send({ ...offset, validFrom: at(-60).toISOString() })
      .expect(201)
    const { body } = await browser.post(`${one}/clockOffsets`).send({ ...offset, offsetSeconds: 0, validFrom: at(600).toISOString() }).expect(201) // prettier-ignore
    expect(body.clockOffsets.map(({ offsetSeconds, isInForce }: { offsetSeconds: number; isInForce: boolean }) => [offsetSeconds, isInForce])).toEqual([[0, false], [0.12, true]]) // prettier-ignore
    const link = (await browser.get(`${path()}/link`).expect(200)).body
    expect(link.sensors[0]).toMatchObject({ confirmedClockOffset: 0.12, fittedClockOffset: null, recordShare: 0 })
  })
})

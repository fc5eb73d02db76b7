import { randomUUID } from 'node:crypto'
import type { Express } from 'express'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { createApp } from '../../server/app.ts'
import { Audit, StationHealthHour, StationKey } from '../../server/models/index.ts'
import { holderOfKey } from '../../server/services/stationKeys.ts'
import { openBrowser, signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson, makeStation } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { helloOf, openLink, serveTelemetry } from '../support/telemetry.ts'
import type { TelemetryServer } from '../support/telemetry.ts'

let parts: TestParts
let app: Express
let made: StationMade
let telemetry: TelemetryServer
let admin: Browser

beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
  telemetry = await serveTelemetry(parts)
  admin = await signedIn(app, (await makePerson(parts.clock, { role: 'admin' })).email)
})
afterAll(() => telemetry.stop())
beforeEach(async () => {
  made = await makeStation(parts.clock)
})
const keysPath = () => `/api/stations/${made.station.id}/keys`

describe('a key of a station', () => {
  it('is shown once, kept as a hash, and lets the station in', async () => {
    const issued = await admin.post(keysPath()).send({ validUntil: null }).expect(201)
    expect(issued.body.key).toMatch(/^[\w-]{8}\.[\w-]{43}$/)
    const row = await StationKey.findByPk(issued.body.id)
    expect(row?.secretHash).toHaveLength(32)
    const listed = await admin.get(keysPath()).expect(200)
    const { key, ...rest } = issued.body
    expect(listed.body).toEqual([rest])
    const link = await openLink(telemetry.url, key)
    link.send(helloOf(made, { stream: randomUUID() }))
    await link.next('welcome')
    const [used] = (await admin.get(keysPath()).expect(200)).body
    expect(used.lastUsedAt).toBe(parts.clock.now().toISOString())
    expect(JSON.stringify(await Audit.findAll({ where: { entity: 'stationKey' } }))).not.toContain(key.split('.')[1])
    await link.close()
  })

  it('that is revoked ends its connection, and revoking it again changes nothing', async () => {
    const { body } = await admin.post(keysPath()).send({ validUntil: null }).expect(201)
    const link = await openLink(telemetry.url, body.key)
    link.send(helloOf(made, { stream: randomUUID() }))
    await link.next('welcome')
    const revoked = await admin.post(`${keysPath()}/${body.id}/revoke`).expect(200)
    expect((await link.closed).code).toBe(4401)
    parts.clock.advance(60)
    expect((await admin.post(`${keysPath()}/${body.id}/revoke`).expect(200)).body).toEqual(revoked.body)
    expect(await holderOfKey(parts, body.key)).toBeNull()
    expect(await Audit.count({ where: { action: 'stationKey.revoke', entityId: String(body.id) } })).toBe(1)
  })

  it('holds until its date and no longer', async () => {
    const validUntil = new Date(parts.clock.now().getTime() + 60_000).toISOString()
    const { body } = await admin.post(keysPath()).send({ validUntil }).expect(201)
    expect(await holderOfKey(parts, body.key)).toMatchObject({ stationId: made.station.id, keyId: body.id })
    parts.clock.advance(60)
    expect(await holderOfKey(parts, body.key)).toBeNull()
  })

  it('with another secret, or of another station, is not found', async () => {
    const other = await makeStation(parts.clock)
    const { body } = await admin.post(keysPath()).send({ validUntil: null }).expect(201)
    expect(await holderOfKey(parts, `${body.prefix}.${'A'.repeat(43)}`)).toBeNull()
    const answer = await admin.post(`/api/stations/${other.station.id}/keys/${body.id}/revoke`).expect(404)
    expect(answer.body.code).toBe('stationKey.notFound')
    expect(await holderOfKey(parts, body.key)).not.toBeNull()
  })

  it.each([
    [{}, 422],
    [{ validUntil: 'soon' }, 422],
    [{ validUntil: null, stationId: 1 }, 422],
  ])('is not issued for %j', async (order, status) => {
    await admin.post(keysPath()).send(order).expect(status)
    expect(await StationKey.count({ where: { stationId: made.station.id } })).toBe(0)
  })

  it('is neither shown to nor issued by anybody but an administrator', async () => {
    const operator = await signedIn(app, (await makePerson(parts.clock)).email)
    await operator.get(keysPath()).expect(403)
    await operator.post(keysPath()).send({ validUntil: null }).expect(403)
    await openBrowser(app).get(keysPath()).expect(401)
    await admin.get('/api/stations/999999/keys').expect(404)
  })
})

describe('the health of a station', () => {
  const healthPath = (from: string, to: string) => `/api/stations/${made.station.id}/health?from=${from}&to=${to}`

  it('is told by hour and sensor, and of the hour under way only what was due is expected', async () => {
    parts.clock.set('2026-12-01T07:15:00Z')
    const row = (hour: string, received: number) => ({
      stationId: made.station.id,
      sensorId: made.sensors[0]?.sensorId ?? 0,
      hour: new Date(hour),
      expected: 14_400,
      received,
      late: 3,
      repeated: 2,
      conflicting: 1,
      clockOffset: 0.25,
      latencyP95: 1.2,
    })
    await StationHealthHour.bulkCreate([row('2026-12-01T06:00:00Z', 14_000), row('2026-12-01T07:00:00Z', 3_500)])
    const { body } = await admin.get(healthPath('2026-12-01T04:00:00Z', '2026-12-01T12:00:00Z')).expect(200)
    const [letter, other] = made.sensors.map((sensor) => sensor.letter)
    const common = { letter, late: 3, repeated: 2, conflicting: 1, clockOffset: 0.25, latencyP95: 1.2 }
    const of = (wanted: string | undefined) => body.filter((hour: { letter: string }) => hour.letter === wanted)
    expect(of(letter)).toEqual([
      { ...common, hour: '2026-12-01T06:00:00.000Z', expected: 14_400, received: 14_000 },
      { ...common, hour: '2026-12-01T07:00:00.000Z', expected: 3_600, received: 3_500 },
    ])
    const nothing = { late: 0, repeated: 0, conflicting: 0, clockOffset: null, latencyP95: null }
    expect(of(other)).toEqual([
      { ...nothing, letter: other, hour: '2026-12-01T06:00:00.000Z', expected: 14_400, received: 0 },
      { ...nothing, letter: other, hour: '2026-12-01T07:00:00.000Z', expected: 3_600, received: 0 },
    ])
  })

  it('of a station that never sent anything is empty', async () => {
    const { body } = await admin.get(healthPath('2026-12-01T06:00:00Z', '2026-12-01T08:00:00Z')).expect(200)
    expect(body).toEqual([])
  })

  it.each([
    ['2026-12-01T08:00:00Z', '2026-12-01T06:00:00Z'],
    ['2026-01-01T00:00:00Z', '2026-12-01T06:00:00Z'],
    ['yesterday', '2026-12-01T06:00:00Z'],
  ])('is refused from %s to %s', async (from, to) => {
    await admin.get(healthPath(from, to)).expect(422)
  })
})

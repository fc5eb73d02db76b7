import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { linkOf, readWindow } from '../../server/services/readings.ts'
import { revokeStationKey } from '../../server/services/stationKeys.ts'
import { makeStation, makeStationKey } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { frameOf, helloOf, openLink, serveTelemetry } from '../support/telemetry.ts'
import type { StationLink, TelemetryServer } from '../support/telemetry.ts'

const six = new Date('2026-12-01T06:00:00Z')
const at = (seconds: number): Date => new Date(six.getTime() + seconds * 1000)

let parts: TestParts
let server: TelemetryServer
let made: StationMade
let key: string
let keyId: number
let stream: string

beforeAll(async () => {
  parts = await testParts()
  server = await serveTelemetry(parts)
})
afterAll(() => server.stop())
beforeEach(async () => {
  parts.clock.set(at(60))
  made = await makeStation(parts.clock)
  const issued = await makeStationKey(parts.clock, made.station.id)
  key = issued.key
  keyId = issued.row.id
  stream = randomUUID()
})

/** A link that has been welcomed. */
async function connect(hello: object = {}): Promise<StationLink> {
  const link = await openLink(server.url, key)
  link.send({ ...helloOf(made, { stream, sentAt: at(60) }), ...hello })
  await link.next('welcome')
  return link
}

const stored = (from: number, to: number) => readWindow(made.station.id, at(from).getTime(), at(to).getTime())

describe('the connection', () => {
  it.each([null, 'nonsense', 'abcdefgh.secret'])('is closed with 4401 for the key %s', async (wrong) => {
    const link = await openLink(server.url, wrong)
    expect((await link.closed).code).toBe(4401)
  })

  it('is closed with 4401 when the key is of another station', async () => {
    const other = await makeStation(parts.clock)
    const link = await openLink(server.url, key)
    link.send(helloOf(other, { stream }))
    expect((await link.closed).code).toBe(4401)
  })

  it('is closed with 4401 at once when the key is revoked', async () => {
    const link = await connect()
    await revokeStationKey(parts, { stationId: made.station.id, keyId, personId: null })
    expect((await link.closed).code).toBe(4401)
    const again = await openLink(server.url, key)
    expect((await again.closed).code).toBe(4401)
  })

  it('is closed with 4403 when the station is retired', async () => {
    await made.station.update({ state: 'retired' })
    const link = await openLink(server.url, key)
    link.send(helloOf(made, { stream }))
    expect((await link.closed).code).toBe(4403)
  })

  it.each([
    [{ sampleRate: 2 }, 'sample rate 2 Hz, deployed 4 Hz'],
    [{ sensors: [] }, null],
    [{ sensors: [{ id: 'X-1', kind: 'pressure', unit: 'dbar' }] }, 'deployed but not named'],
  ])('is closed when hello is %j', async (change, reason) => {
    const link = await openLink(server.url, key)
    link.send({ ...helloOf(made, { stream }), ...change })
    if (reason === null) return expect(await link.next('refused')).toMatchObject({ code: 'malformed' })
    expect(await link.closed).toEqual({ code: 4409, reason: expect.stringContaining(reason) })
  })

  it('is closed with 4409 when a unit does not fit the kind', async () => {
    const link = await openLink(server.url, key)
    const hello = helloOf(made, { stream })
    link.send({ ...hello, sensors: hello.sensors.map((sensor) => ({ ...sensor, unit: 'm' })) })
    expect(await link.closed).toEqual({ code: 4409, reason: expect.stringContaining('pressure sensors are in dbar') })
  })

  it('is closed with 4400 after three malformed messages in a row, not after three in all', async () => {
    const link = await connect()
    for (let seq = 1; seq <= 3; seq++) {
      link.sendRaw('no')
      link.sendRaw(Buffer.from([1, 2, 3]))
      link.send(frameOf(made, { seq, start: at(seq) }))
    }
    await link.acknowledged(3)
    for (let n = 0; n < 3; n++) link.sendRaw('[]')
    expect((await link.closed).code).toBe(4400)
  })

  it('is closed with 1009 when a message is too large', async () => {
    const link = await connect()
    link.sendRaw(`"${'x'.repeat(65_536)}"`)
    expect((await link.closed).code).toBe(1009)
  })

  it('is closed with 4410 when a newer one of the same station is welcomed', async () => {
    const older = await connect()
    const newer = await connect()
    expect((await older.closed).code).toBe(4410)
    newer.send(frameOf(made, { seq: 1, start: at(1) }))
    await newer.acknowledged(1)
    expect(linkOf(made.station.id).state).toBe('connected')
  })

  it('is closed with 4429 when record comes faster than fifty times real time', async () => {
    const link = await connect()
    for (let seq = 1; seq <= 11; seq++) link.send(frameOf(made, { seq, start: at(seq * 60 - 900), seconds: 60 }))
    expect((await link.closed).code).toBe(4429)
    await server.store.flush()
    const again = await connect()
    expect(again.messages).toMatchObject([{ type: 'welcome', resumeFrom: 11 }])
    again.send(frameOf(made, { seq: 11, start: at(0), seconds: 60 }))
    expect((await again.closed).code).toBe(4429)
    parts.clock.advance(1)
    const later = await connect()
    later.send(frameOf(made, { seq: 11, start: at(0), seconds: 60 }))
    await later.acknowledged(11)
  })

  it('is closed with 1012 when the server stops, after what was sent is acknowledged', async () => {
    const link = await connect()
    link.send(frameOf(made, { seq: 1, start: at(1) }))
    link.send(frameOf(made, { seq: 2, start: at(2) }))
    await link.acknowledged(2)
    await server.stop()
    expect((await link.closed).code).toBe(1012)
    server = await serveTelemetry(parts)
  })

  it('is closed with 4408 when a ping is not answered', async () => {
    await server.stop()
    server = await serveTelemetry(parts, 40)
    const mute = await openLink(server.url, key, { autoPong: false })
    expect((await mute.closed).code).toBe(4408)
    await server.stop()
    server = await serveTelemetry(parts)
  })

  it('is refused on any other path and without the subprotocol', async () => {
    await expect(openLink(server.url, key, { path: '/elsewhere' })).rejects.toThrow('404')
    await expect(openLink(server.url, key, { protocol: 'something.else' })).rejects.toThrow('400')
  })
})

describe("a station's clock", () => {
  it('that is behind is told and shown, and its readings are marked with it', async () => {
    const link = await connect({ sentAt: at(48).toISOString() })
    for (let seq = 1; seq <= 6; seq++) link.send(frameOf(made, { seq, start: at(seq), sentAt: at(48) }))
    expect(await link.next('clock')).toMatchObject({ offsetSeconds: 12 })
    await link.acknowledged(6)
    expect(linkOf(made.station.id).clockOffsetSeconds).toBe(-12)
    expect((await stored(1, 7)).clockOffsetSeconds).toBe(12)
  })

  it('that is right is no news twice', async () => {
    const link = await connect()
    for (let seq = 1; seq <= 20; seq++) link.send(frameOf(made, { seq, start: at(seq), sentAt: at(60) }))
    await link.acknowledged(20)
    expect(link.messages.filter(({ type }) => type === 'clock')).toEqual([{ type: 'clock', offsetSeconds: 0 }])
  })
})

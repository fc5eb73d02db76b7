import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { Conflict, Frame, Stream } from '../../server/models/index.ts'
import { linkOf, readWindow } from '../../server/services/readings.ts'
import { revokeStationKey } from '../../server/services/stationKeys.ts'
import { makeStation, makeStationKey } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { seeded, shuffled } from '../support/seeded.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { frameOf, helloOf, openLink, readingAt, serveTelemetry } from '../support/telemetry.ts'
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
const presentIn = async (from: number, to: number) => (await stored(from, to)).sampleCount

describe('a station that connects', () => {
  it('is welcomed, streams, and hears of every frame that is durable', async () => {
    const link = await connect()
    for (let seq = 1; seq <= 5; seq++) link.send(frameOf(made, { seq, start: at(seq) }))
    await link.acknowledged(5)
    const window = await stored(1, 6)
    expect(window.letters).toEqual(made.sensors.map(({ letter }) => letter))
    expect(window.startMs).toBe(at(1).getTime())
    window.series.forEach((series, sensor) => {
      expect([...series]).toEqual(Array.from({ length: 20 }, (_, n) => readingAt(sensor, at(1 + n / 4).getTime())))
    })
  })

  it('is told to resume behind the last durable frame', async () => {
    const first = await connect()
    for (const seq of [1, 2, 3]) first.send(frameOf(made, { seq, start: at(seq) }))
    await first.acknowledged(3)
    await first.close()
    const second = await openLink(server.url, key)
    second.send(helloOf(made, { stream }))
    expect(await second.next('welcome')).toMatchObject({ resumeFrom: 4, heartbeatSeconds: 15, maxFrameBytes: 65536 })
  })

  it('is told to resume behind the last durable frame by a server that has restarted', async () => {
    const first = await connect()
    for (const seq of [1, 2, 4]) first.send(frameOf(made, { seq, start: at(seq) }))
    await first.acknowledged(2)
    await server.stop()
    server = await serveTelemetry(parts)
    const second = await openLink(server.url, key)
    second.send(helloOf(made, { stream }))
    expect(await second.next('welcome')).toMatchObject({ resumeFrom: 3 })
    second.send(frameOf(made, { seq: 3, start: at(3) }))
    await second.acknowledged(4)
    expect(await presentIn(1, 5)).toBe(16 * 3)
  })

  it('begins another stream at 1', async () => {
    const first = await connect()
    first.send(frameOf(made, { seq: 1, start: at(1) }))
    await first.acknowledged(1)
    await first.close()
    const second = await openLink(server.url, key)
    second.send(helloOf(made, { stream: randomUUID() }))
    expect(await second.next('welcome')).toMatchObject({ resumeFrom: 1 })
  })

  it('is shown as connected while it is, and as silent afterwards', async () => {
    expect(linkOf(made.station.id).state).toBe('never')
    const link = await connect()
    link.send(frameOf(made, { seq: 1, start: at(59) }))
    await link.acknowledged(1)
    expect(linkOf(made.station.id)).toMatchObject({ state: 'connected', lastReadingAt: at(60).toISOString() })
    expect(linkOf(made.station.id).recordShare).toBeCloseTo(1 / 1200, 9)
    const gone = new Promise((resolve) => parts.bus.subscribe('link.changed', resolve))
    await link.close()
    await gone
    expect(linkOf(made.station.id).state).toBe('silent')
  })
})

describe('a frame that comes again', () => {
  it('is acknowledged again and stored once', async () => {
    const link = await connect()
    link.send(frameOf(made, { seq: 1, start: at(1) }))
    await link.acknowledged(1)
    const acks = link.messages.filter(({ type }) => type === 'ack').length
    link.send(frameOf(made, { seq: 1, start: at(1) }))
    for (let n = 0; n <= acks; n++) await link.next('ack')
    expect(await Frame.count({ where: { stationId: made.station.id } })).toBe(1)
    expect(link.messages.some(({ type }) => type === 'refused')).toBe(false)
  })

  it('is acknowledged after a crash between commit and acknowledgement, and stored once', async () => {
    const first = await connect()
    const durable = new Promise((resolve) => parts.bus.subscribe('readings.stored', resolve))
    first.send(frameOf(made, { seq: 1, start: at(1) }))
    first.socket.pause()
    await durable
    first.socket.terminate()
    const second = await openLink(server.url, key)
    second.send(helloOf(made, { stream }))
    await second.next('welcome')
    second.send(frameOf(made, { seq: 1, start: at(1) }))
    second.send(frameOf(made, { seq: 2, start: at(2) }))
    await second.acknowledged(2)
    expect(await Frame.count({ where: { stationId: made.station.id } })).toBe(2)
    expect(await presentIn(0, 10)).toBe(8 * 3)
    expect(second.messages.some(({ type }) => type === 'refused')).toBe(false)
  })

  it('with other content is put aside and the first stays', async () => {
    const link = await connect()
    link.send(frameOf(made, { seq: 1, start: at(1) }))
    await link.acknowledged(1)
    link.send(frameOf(made, { seq: 1, start: at(1), shift: 0.5 }))
    expect(await link.next('refused')).toMatchObject({ seq: 1, code: 'conflict' })
    expect((await stored(1, 2)).series[0]?.[0]).toBe(readingAt(0, at(1).getTime()))
    const [aside] = await Conflict.findAll({ where: { stationId: made.station.id } })
    expect(aside).toMatchObject({ seq: 1, reason: 'conflict', startsAt: at(1) })
  })

  it('under another number and time is put aside too when its number is taken', async () => {
    const link = await connect()
    link.send(frameOf(made, { seq: 1, start: at(1) }))
    await link.acknowledged(1)
    link.send(frameOf(made, { seq: 1, start: at(30) }))
    expect(await link.next('refused')).toMatchObject({ seq: 1, code: 'conflict' })
    expect(await presentIn(0, 60)).toBe(4 * 3)
  })

  it('in another stream is compared sample by sample: the same is dropped, the new is stored', async () => {
    const first = await connect()
    first.send(frameOf(made, { seq: 1, start: at(1), seconds: 2 }))
    await first.acknowledged(1)
    await first.close()
    stream = randomUUID()
    const second = await connect()
    second.send(frameOf(made, { seq: 1, start: at(1) }))
    second.send(frameOf(made, { seq: 2, start: at(2), seconds: 2 }))
    second.send(frameOf(made, { seq: 3, start: at(2.5), shift: 1 }))
    await second.acknowledged(3)
    expect(await second.next('refused')).toMatchObject({ seq: 3, code: 'conflict' })
    expect(await presentIn(0, 10)).toBe(12 * 3)
    expect(await Frame.count({ where: { stationId: made.station.id } })).toBe(2)
  })
})

describe('frames that come late or out of order', () => {
  it('are stored once, and acknowledged when the hole before them is filled', async () => {
    const link = await connect()
    for (const seq of [5, 3, 2, 4]) link.send(frameOf(made, { seq, start: at(seq) }))
    expect(await link.next('ack')).toMatchObject({ seq: 0 })
    link.send(frameOf(made, { seq: 1, start: at(1) }))
    await link.acknowledged(5)
    expect(await presentIn(1, 6)).toBe(20 * 3)
  })

  it('shuffled and three in ten of them twice give the same readings as in order', async () => {
    const link = await connect()
    const random = seeded(20261201)
    const frames = Array.from({ length: 60 }, (_, n) => frameOf(made, { seq: n + 1, start: at(n) }))
    const sent = shuffled([...frames, ...frames.filter(() => random() < 0.3)], random)
    for (const frame of sent) link.send(frame)
    await link.acknowledged(60)
    const window = await stored(0, 60)
    window.series.forEach((series, sensor) => {
      expect([...series]).toEqual(Array.from({ length: 240 }, (_, n) => readingAt(sensor, at(n / 4).getTime())))
    })
    expect(await Frame.count({ where: { stationId: made.station.id } })).toBe(60)
    expect(link.messages.some(({ type }) => type === 'refused')).toBe(false)
    expect(Number((await Stream.findOne({ where: { stationId: made.station.id } }))?.durableSeq)).toBe(60)
  })

  it('keep the time of the instrument and that of arrival', async () => {
    const link = await connect()
    link.send(frameOf(made, { seq: 1, start: at(1), sentAt: at(2.25) }))
    await link.acknowledged(1)
    const [frame] = await Frame.findAll({ where: { stationId: made.station.id } })
    expect(frame).toMatchObject({ startsAt: at(1), sentAt: at(2.25), arrivedAt: at(60) })
  })
})

describe('a frame that cannot be used', () => {
  const cases: [code: string, change: (frame: ReturnType<typeof frameOf>) => object][] = [
    ['future', (frame) => ({ ...frame, start: at(63).toISOString() })],
    ['tooOld', (frame) => ({ ...frame, start: at(60 - 86_401).toISOString() })],
    ['unknownSensor', (frame) => ({ ...frame, sensors: ['X-9', ...frame.sensors.slice(1)] })],
    ['wrongInterval', (frame) => ({ ...frame, interval: 0.5 })],
    ['malformed', (frame) => ({ ...frame, values: frame.values.slice(1) })],
    ['malformed', (frame) => ({ ...frame, values: frame.values.map((series, n) => series.slice(n === 0 ? 1 : 0)) })],
    ['malformed', (frame) => ({ ...frame, sensors: frame.sensors.map(() => frame.sensors[0]) })],
    ['malformed', (frame) => ({ ...frame, values: frame.values.map(() => [1, '2', null, 4]) })],
    ['malformed', (frame) => ({ ...frame, values: frame.values.map(() => [1e308, 1, 1, 1]) })],
    ['malformed', (frame) => ({ ...frame, start: 'yesterday' })],
    ['malformed', (frame) => ({ ...frame, extra: 1 })],
  ]

  it.each(cases)('is refused as %s, put aside, and counts as handled (%#)', async (code, change) => {
    const link = await connect()
    link.send(change(frameOf(made, { seq: 1, start: at(50) })))
    link.send(frameOf(made, { seq: 2, start: at(51) }))
    await link.acknowledged(2)
    expect(await link.next('refused')).toMatchObject({ seq: 1, code })
    expect(await presentIn(0, 70)).toBe(4 * 3)
    const aside = await Conflict.findAll({ where: { stationId: made.station.id } })
    expect(aside.map(({ seq, reason }) => [Number(seq), reason])).toEqual([[1, code]])
  })

  it('without a readable number is refused without one, and nothing is counted as handled', async () => {
    const link = await connect()
    link.sendRaw('{"type":"frame","seq":')
    expect(await link.next('refused')).toMatchObject({ seq: null, code: 'malformed' })
    link.send(frameOf(made, { seq: 1, start: at(1) }))
    await link.acknowledged(1)
  })

  it('keeps missing samples missing and negative zero zero', async () => {
    const link = await connect()
    const frame = frameOf(made, { seq: 1, start: at(1) })
    link.sendRaw(
      JSON.stringify({ ...frame, values: frame.values.map(() => [null, 1.23456, 7, 2]) }).replaceAll('7', '-0'),
    )
    await link.acknowledged(1)
    const [series] = (await stored(1, 2)).series
    expect([...(series ?? [])]).toEqual([NaN, 1.2346, 0, 2])
  })
})

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

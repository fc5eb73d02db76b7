import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { Conflict, Frame, Stream } from '../../server/models/index.ts'
import { linkOf, readWindow } from '../../server/services/readings.ts'
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

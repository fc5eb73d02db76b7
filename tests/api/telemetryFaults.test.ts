import { randomUUID } from 'node:crypto'
import { Sequelize } from 'sequelize'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { Frame } from '../../server/models/index.ts'
import { execute, select } from '../../server/models/sql.ts'
import { readWindow } from '../../server/services/readings.ts'
import { makeStation, makeStationKey } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { seeded } from '../support/seeded.ts'
import { frameOf, helloOf, openLink, readingAt, serveTelemetry } from '../support/telemetry.ts'
import type { StationLink, TelemetryServer } from '../support/telemetry.ts'
import { until } from '../support/until.ts'

const six = new Date('2026-12-01T06:00:00Z')
const at = (seconds: number): Date => new Date(six.getTime() + seconds * 1000)

let parts: TestParts
let server: TelemetryServer

beforeAll(async () => {
  parts = await testParts()
  server = await serveTelemetry(parts)
})
afterAll(() => server.stop())
beforeEach(() => parts.clock.set(at(600)))

interface Connected {
  made: StationMade
  link: StationLink
  connect(): Promise<StationLink>
}

async function stationOnLine(): Promise<Connected> {
  const made = await makeStation(parts.clock)
  const { key } = await makeStationKey(parts.clock, made.station.id)
  const stream = randomUUID()
  const connect = async () => {
    const link = await openLink(server.url, key)
    link.send(helloOf(made, { stream, sentAt: at(600) }))
    await link.next('welcome')
    return link
  }
  return { made, link: await connect(), connect }
}

const valuesOf = async ({ station }: StationMade, from: number, to: number) =>
  (await readWindow(station.id, at(from).getTime(), at(to).getTime())).series.map((series) => [...series])
const expected = (from: number, to: number) =>
  [0, 1, 2].map((sensor) => Array.from({ length: (to - from) * 4 }, (_, n) => readingAt(sensor, at(from + n / 4).getTime()))) // prettier-ignore

describe('malformed messages', () => {
  it('by the thousand store nothing that is no number, and hurt neither the server nor another station', async () => {
    const random = seeded(28)
    const wild = await stationOnLine()
    const quiet = await stationOnLine()
    const pick = <Item>(items: readonly Item[]): Item => items[Math.floor(random() * items.length)] as Item
    const rounds = 1500
    for (let seq = 1; seq <= rounds; seq++) {
      parts.clock.advance(0.04)
      const frame = frameOf(wild.made, { seq, start: at((seq % 500) + random()) })
      const text = JSON.stringify(spoilt(frame, pick, random))
      wild.link.sendRaw(random() < 0.1 ? text.slice(0, Math.floor(random() * text.length)) : text)
      wild.link.send(frameOf(wild.made, { seq: 10_000 + seq, start: at(seq - 20_000) }))
      if (seq % 250 === 0) quiet.link.send(frameOf(quiet.made, { seq: seq / 250, start: at(seq / 250) }))
      if (seq % 50 === 0) await allRead(wild.link)
    }
    await allRead(wild.link)
    await server.store.flush()
    await quiet.link.acknowledged(6)
    expect(await valuesOf(quiet.made, 1, 7)).toEqual(expected(1, 7))
    expect(await valuesOf(wild.made, 1 - 20_000, rounds + 1 - 20_000)).toEqual(
      expected(1 - 20_000, rounds + 1 - 20_000),
    )
    for (const value of (await valuesOf(wild.made, 0, 700)).flat()) {
      expect(Number.isNaN(value) || (value >= -1000 && value <= 100_000)).toBe(true)
    }
    expect(wild.link.messages.filter(({ type }) => type === 'refused').length).toBeGreaterThan(rounds / 2)
    expect(wild.link.socket.readyState).toBe(wild.link.socket.OPEN)
    expect(parts.log.filter((line) => /"level":"(error|fatal)"/.test(line))).toEqual([])
  })

  it('on the level of the protocol end that connection only', async () => {
    const { link: other, made } = await stationOnLine()
    for (const bytes of [
      [0x81, 0x05, 1, 2, 3],
      [0x8b, 0x00],
      [0xff, 0xff, 0xff],
      [0x88, 0x7e, 0xff, 0xff],
    ]) {
      const { link } = await stationOnLine()
      link.socket.on('error', () => undefined)
      rawSocketOf(link).write(Buffer.from(bytes))
      expect([1002, 1006, 1007, 1009]).toContain((await link.closed).code)
    }
    other.send(frameOf(made, { seq: 1, start: at(1) }))
    await other.acknowledged(1)
  })
})

const oddities = [NaN, Infinity, -Infinity, 1e308, -1e308, '1', '', true, [], {}, null, -0, 0, 12.5, 99_999.99999]
const fields = ['seq', 'start', 'interval', 'sensors', 'values', 'sentAt', 'type', 'colour']

/** A frame of which some readings, or one field, are something else. */
function spoilt(
  frame: ReturnType<typeof frameOf>,
  pick: <Item>(items: readonly Item[]) => Item,
  random: () => number,
): object {
  if (random() < 0.5) return { ...frame, [pick(fields)]: pick(oddities) }
  const values = frame.values.map((series) => series.map((value) => (random() < 0.3 ? pick(oddities) : value)))
  return { ...frame, values }
}

/** A ping is answered behind all that was sent before it. */
const allRead = ({ socket }: StationLink): Promise<void> =>
  new Promise((resolve) => {
    socket.once('pong', () => resolve())
    socket.ping()
  })

/** The stream below a websocket, to write what no client would. */
function rawSocketOf({ socket }: StationLink): { write(bytes: Buffer): void } {
  const below = Reflect.get(socket, '_socket')
  if (!below || typeof below.write !== 'function') throw new Error('the socket has no stream')
  return below
}

describe('while the database does not take readings', () => {
  it('nothing is acknowledged, and everything is when it does again', async () => {
    const { made, link } = await stationOnLine()
    link.send(frameOf(made, { seq: 1, start: at(1) }))
    await link.acknowledged(1)
    const other = anotherClient()
    const locking = await other.transaction()
    await select(other, 'SELECT id FROM streams WHERE stationId = :id FOR UPDATE', { id: made.station.id }, locking)
    for (let seq = 2; seq <= 200; seq++) link.send(frameOf(made, { seq, start: at(seq) }))
    await until('frames wait', () => server.store.waitingOf(made.station.id) >= 199, 8_000)
    expect(link.messages.filter((message) => message.type === 'ack' && message.seq > 1)).toEqual([])
    await locking.commit()
    await other.close()
    await link.acknowledged(200)
    expect(await valuesOf(made, 1, 201)).toEqual(expected(1, 201))
  })

  it('connections that the database cuts are made anew, and nothing is lost or stored twice', async () => {
    const { made, link } = await stationOnLine()
    for (let round = 0; round < 6; round++) {
      for (let n = 1; n <= 30; n++) link.send(frameOf(made, { seq: round * 30 + n, start: at(round * 30 + n) }))
      await cutConnections()
    }
    await link.acknowledged(180)
    expect(await valuesOf(made, 1, 181)).toEqual(expected(1, 181))
    expect(await Frame.count({ where: { stationId: made.station.id } })).toBe(180)
  })
})

/** A connection of its own, on which no table is defined. */
const anotherClient = (): Sequelize =>
  new Sequelize(parts.environment.databaseUrl, { dialect: 'mariadb', logging: false, pool: { max: 1 } })

/** Ends every connection of this schema but the one that asks. */
async function cutConnections(): Promise<void> {
  const other = anotherClient()
  const rows = await select<{ id: number }>(
    other,
    'SELECT ID AS id FROM information_schema.PROCESSLIST WHERE DB = DATABASE() AND ID <> CONNECTION_ID()',
  )
  for (const { id } of rows) await execute(other, `KILL ${id}`).catch(() => undefined)
  await other.close()
}

describe('a station whose readings the database refuses', () => {
  it('is sent away to try again, while the others go on', async () => {
    const bad = await stationOnLine()
    const good = await stationOnLine()
    await execute(
      parts.sequelize,
      `CREATE TRIGGER refuseFrames BEFORE INSERT ON frames FOR EACH ROW
       IF NEW.stationId = ${bad.made.station.id} THEN SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'no'; END IF`,
    )
    bad.link.send(frameOf(bad.made, { seq: 1, start: at(1) }))
    good.link.send(frameOf(good.made, { seq: 1, start: at(1) }))
    await good.link.acknowledged(1)
    expect((await bad.link.closed).code).toBe(1013)
    await execute(parts.sequelize, 'DROP TRIGGER refuseFrames')
    const again = await bad.connect()
    again.send(frameOf(bad.made, { seq: 1, start: at(1) }))
    await again.acknowledged(1)
    expect(await valuesOf(bad.made, 1, 2)).toEqual(expected(1, 2))
  })
})

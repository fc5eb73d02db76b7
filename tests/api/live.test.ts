import { createServer } from 'node:http'
import type { Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { createApp } from '../../server/app.ts'
import { startComputeEstimates } from '../../server/jobs/computeEstimates.ts'
import type { ComputeEstimates } from '../../server/jobs/computeEstimates.ts'
import type { Person } from '../../server/models/index.ts'
import { beginLinks } from '../../server/services/readings/links.ts'
import { startLive } from '../../server/sockets/live.ts'
import type { Live } from '../../server/sockets/live.ts'
import { createUpgradeDispatcher } from '../../server/sockets/upgrade.ts'
import { makePerson, makeStation, usualPassword } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { instantEstimators } from '../support/instantEstimators.ts'
import { openLive } from '../support/liveBrowser.ts'
import type { LiveBrowser } from '../support/liveBrowser.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { storeSea, surfaceArray } from '../support/storedSea.ts'

const noon = new Date('2026-12-01T12:00:00Z')
const at = (minutes: number, seconds = 0): Date => new Date(noon.getTime() + minutes * 60_000 + seconds * 1000)

let parts: TestParts
let server: Server
let live: Live
let job: ComputeEstimates
let made: StationMade
let operator: Person
let cookie: string
let opened: LiveBrowser[] = []
let origin: string
const rooms = () => ['stations', `station:${made.station.id}`, `traces:${made.station.id}`, 'system']

beforeAll(async () => {
  parts = await testParts({ PORT: '8470' })
  parts.clock.set(noon)
  beginLinks(parts.clock)
  origin = parts.environment.publicUrl
  server = createServer(createApp(parts))
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  live = await startLive(parts, { upgrades: createUpgradeDispatcher(server), isUntimed: true })
  job = await startComputeEstimates(parts, { estimators: instantEstimators(), isUnscheduled: true })
})
afterAll(async () => {
  await job.stop()
  await live.stop()
  await new Promise((resolve) => server.close(resolve))
})
beforeEach(async () => {
  made = await makeStation(parts.clock, surfaceArray)
  operator = await makePerson(parts.clock)
  cookie = await signIn(operator)
})
afterEach(() => {
  for (const { socket } of opened) socket.terminate()
  opened = []
})

const base = () => `127.0.0.1:${(server.address() as AddressInfo).port}`

async function call(method: string, path: string, body?: unknown, headers: Record<string, string> = {}) {
  return fetch(`http://${base()}${path}`, {
    method,
    headers: { 'X-Offing': '1', 'Content-Type': 'application/json', ...headers },
    ...(body !== undefined && { body: JSON.stringify(body) }),
  })
}
async function signIn({ email }: Person): Promise<string> {
  const answer = await call('POST', '/api/session', { email, password: usualPassword })
  return answer.headers.get('set-cookie')?.split(';')[0] ?? ''
}
const get = async (path: string): Promise<unknown> => (await call('GET', path, undefined, { Cookie: cookie })).json()

async function open(headers: Record<string, string> = { Cookie: cookie, Origin: origin }): Promise<LiveBrowser> {
  const browser = await openLive(`ws://${base()}/live`, headers)
  opened.push(browser)
  return browser
}
/** Everything that was told so far has arrived when the time of this beat has. */
async function untilTold(browser: LiveBrowser): Promise<void> {
  await live.settled()
  parts.clock.advance(1)
  const serverTime = parts.clock.now().toISOString()
  await live.beat()
  await live.settled()
  await browser.next((message) => message.type === 'time' && message.serverTime === serverTime)
}

describe('the door of the live feed', () => {
  it('is open to our own pages with a session, and greets them', async () => {
    const browser = await open()
    const hello = await browser.next(({ type }) => type === 'hello')
    expect(hello).toMatchObject({ readOnly: false, serverTime: parts.clock.now().toISOString() })
  })

  it.each([
    ['a page of another site', () => ({ Cookie: cookie, Origin: 'https://elsewhere.example' }), 403],
    ['a program that names no origin', () => ({ Cookie: cookie }), 403],
    ['our page without a session', () => ({ Origin: origin }), 401],
    ['our page with a forged token', () => ({ Origin: origin, Cookie: `${cookie.slice(0, -3)}abc` }), 401],
  ])('is shut to %s', async (_who, headers, status) => {
    await expect(open(headers())).rejects.toThrow(`refused: ${status}`)
  })

  it('is shut to a session that was signed out', async () => {
    await call('DELETE', '/api/session', undefined, { Cookie: cookie })
    await expect(open()).rejects.toThrow('refused: 401')
  })

  it.each([['{"type":"subscribe","rooms":["people:1"]}'], ['{"type":"sell"}'], ['not JSON'], ['{"__proto__":{}}']])(
    'puts out who sends %s',
    async (text) => {
      const browser = await open()
      browser.say(text)
      expect(await browser.closed).toBe(4400)
    },
  )
})

describe('a session and its live feed', () => {
  it('end together: nothing comes after the sign-out', async () => {
    const browser = await open()
    await browser.join('stations')
    await call('DELETE', '/api/session', undefined, { Cookie: cookie })
    parts.bus.publish('link.changed', { stationId: made.station.id })
    expect(await browser.closed).toBe(4401)
    await live.settled()
    expect(browser.heard.at(-1)).toEqual({ type: 'session', state: 'ended' })
  })

  it('end when the person is disabled, at the word of the bus', async () => {
    const browser = await open()
    await operator.update({ disabledAt: parts.clock.now() })
    parts.bus.publish('person.changed', { personId: operator.id })
    expect(await browser.closed).toBe(4401)
  })

  it('end at the next heartbeat when the word was lost', async () => {
    const browser = await open()
    await operator.update({ disabledAt: parts.clock.now() })
    await live.beat()
    expect(await browser.closed).toBe(4401)
  })

  it('go on read-only after the absolute limit, kept awake by the feed itself', async () => {
    const browser = await open()
    for (let hours = 0; hours < 25; hours += 1) {
      parts.clock.advance(3600)
      await live.beat()
    }
    expect(await browser.next(({ type }) => type === 'session')).toEqual({ type: 'session', state: 'readOnly' })
    expect(browser.socket.readyState).toBe(browser.socket.OPEN)
    const session = await call('GET', '/api/session', undefined, { Cookie: cookie })
    expect(await session.json()).toMatchObject({ readOnly: true })
  })
})

describe('events', () => {
  it('of a new window are what REST gives for it, in both rooms', async () => {
    const browser = await open()
    await browser.join(...rooms())
    await storeSea(made, { from: at(-30), to: at(1), commitId: 1 })
    parts.clock.set(at(1))
    await job.wake()
    await untilTold(browser)
    const rest = await get(`/api/stations/${made.station.id}`)
    const estimates = browser.events().filter(({ kind }) => kind === 'estimate')
    expect(new Set(estimates.map(({ room }) => room))).toEqual(new Set(['stations', `station:${made.station.id}`]))
    expect(estimates.at(-1)?.body).toEqual(Object(rest).estimate)
    const series = Object(await get(`/api/stations/${made.station.id}/series?hours=1&stepSeconds=60`))
    const points = browser.events().filter(({ kind }) => kind === 'seriesPoint')
    const newest = points.find(({ body }) => Object(body).at === at(1).toISOString())
    expect(newest?.body).toEqual(series.points.at(-1))
    const told = browser.events().filter(({ kind, body }) => kind === 'station' && Object(body).id === made.station.id)
    expect(told.at(-1)?.body).toEqual(rest)
  })

  it('count up by one in each room, so that a hole is seen', async () => {
    const browser = await open()
    const { rooms: joined } = await browser.join(...rooms())
    for (let n = 0; n < 5; n += 1) parts.bus.publish('link.changed', { stationId: made.station.id })
    await untilTold(browser)
    for (const { room, seq } of joined.filter(({ room }) => !room.startsWith('traces') && room !== 'system')) {
      const numbers = browser.events().flatMap((event) => (event.room === room ? [event.seq] : []))
      expect(numbers).toEqual(numbers.map((_, n) => seq + 1 + n))
      expect(numbers.length).toBeGreaterThanOrEqual(5)
    }
  })

  it('that could not be made leave a hole in their rooms', async () => {
    const browser = await open()
    const room = 'station:999999'
    const { rooms: joined } = await browser.join(room)
    parts.bus.publish('link.changed', { stationId: 999_999 })
    await live.settled()
    expect((await browser.join(room)).rooms[0]?.seq).toBe((joined[0]?.seq ?? 0) + 1)
    expect(browser.events()).toEqual([])
  })

  it('missed while away are found by fetching: a newcomer hears from the number that it was told', async () => {
    parts.bus.publish('link.changed', { stationId: made.station.id })
    const first = await open()
    const before = await first.join('stations')
    parts.bus.publish('link.changed', { stationId: made.station.id })
    await untilTold(first)
    const epochs = [await first.next(({ type }) => type === 'hello')]
    first.socket.terminate()

    const again = await open()
    epochs.push(await again.next(({ type }) => type === 'hello'))
    const { rooms: joined } = await again.join('stations')
    expect(joined[0]?.seq).toBeGreaterThan(before.rooms[0]?.seq ?? 0)
    expect(new Set(epochs.map((hello) => hello.type === 'hello' && hello.epoch)).size).toBe(1)
    const rest = await get(`/api/stations/${made.station.id}`)
    parts.bus.publish('link.changed', { stationId: made.station.id })
    const event = await again.next(({ type }) => type === 'event')
    expect(event).toMatchObject({ seq: (joined[0]?.seq ?? 0) + 1, body: rest })
  })

  it('of a late window of long ago are points of the series alone', async () => {
    await storeSea(made, { from: at(-30), to: at(1), commitId: 1 })
    parts.clock.set(at(1))
    await job.wake()
    const browser = await open()
    await browser.join('stations', `station:${made.station.id}`)
    parts.bus.publish('estimate.saved', { stationId: made.station.id, windowEndsAt: at(-5).getTime(), revision: 2 })
    await live.settled()
    const event = await browser.next(({ type }) => type === 'event')
    expect(event).toMatchObject({ kind: 'seriesPoint', body: { at: at(-5).toISOString() } })
    expect(browser.events()).toHaveLength(1)
  })

  it('of traces go to their own room, and those of long work to the system', async () => {
    const browser = await open()
    await browser.join(...rooms())
    const chunk = {
      stationId: made.station.id,
      startsAt: at(0).toISOString(),
      interval: 0.5,
      sensors: ['A'],
      values: [[1, null]],
    }
    parts.bus.publish('traces.arrived', chunk)
    const work = {
      id: 7,
      kind: 'pastEstimates',
      title: 'Past',
      status: 'running' as const,
      progress: 0.5,
      detail: null,
      startedAt: null,
      updatedAt: at(0).toISOString(),
    }
    parts.bus.publish('job.progressed', work)
    await browser.next((message) => message.type === 'event' && message.room === 'system')
    expect(browser.events().map(({ room, kind, body }) => [room, kind, body])).toEqual([
      [`traces:${made.station.id}`, 'traces', chunk],
      ['system', 'job', work],
    ])
  })

  it('of rooms that were left do not come', async () => {
    const browser = await open()
    await browser.join('stations')
    browser.say({ type: 'unsubscribe', rooms: ['stations'] })
    await browser.join('system')
    parts.bus.publish('link.changed', { stationId: made.station.id })
    await untilTold(browser)
    expect(browser.events()).toEqual([])
  })
})

describe('a browser that does not answer', () => {
  it('is gone after two heartbeats without a pong', async () => {
    const browser = await open()
    browser.socket.pause()
    const gone = new Promise<void>((resolve) => browser.socket.once('close', () => resolve()))
    for (let n = 0; n < 3; n += 1) await live.beat()
    browser.socket.resume()
    await gone
  })

  it('that reads nothing is put out with little queued, and the others hear everything', async () => {
    const [slow, quick] = [await open(), await open()]
    const room = `traces:${made.station.id}`
    await slow.join(room)
    await quick.join(room)
    slow.socket.pause()
    const values = [Array.from({ length: 3_000 }, (_, n) => n / 7)]
    const chunk = { stationId: made.station.id, startsAt: at(0).toISOString(), interval: 0.5, sensors: ['A'], values }
    const rounds = 400
    for (let n = 0; n < rounds; n += 1) {
      parts.bus.publish('traces.arrived', chunk)
      if (n % 20 === 0) await quick.next((message) => message.type === 'event' && message.seq >= n)
    }
    live.relieve()
    parts.clock.advance(11)
    live.relieve()
    slow.socket.resume()
    expect([1006, 4008]).toContain(await slow.closed)
    await quick.next((message) => message.type === 'event' && message.seq === rounds)
    expect(quick.events()).toHaveLength(rounds)
    expect(slow.events().length).toBeLessThan(rounds)
  })
})

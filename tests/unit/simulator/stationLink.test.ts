import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { demonstrationStations } from '../../../shared/demonstration/stations.ts'
import { seaSource } from '../../../simulator/client/seaSource.ts'
import { stream, type Streaming } from '../../../simulator/client/stream.ts'
import { recordingSource } from '../../../simulator/replay/recordingSource.ts'
import { quiet } from '../../../simulator/scenarios/quiet.ts'
import { fakeServer, type FakeServer } from '../../support/simulator/fakeServer.ts'
import { handClock, type HandClock } from '../../support/simulator/handClock.ts'

const start = Date.parse('2026-11-12T14:30:00.000Z')
const sea = { scenario: quiet, seed: 3, anchor: start }
const fairway = demonstrationStations[1]

let server: FakeServer
let clock: HandClock
let folder: string
let streaming: Streaming | null
let said: string[]
let linkStands: (time: number) => boolean

beforeEach(async () => {
  server = await fakeServer()
  clock = handClock(start)
  folder = mkdtempSync(join(tmpdir(), 'offing-simulator-'))
  streaming = null
  said = []
  linkStands = () => true
})

afterEach(async () => {
  streaming?.stop()
  await server.stop()
  rmSync(folder, { recursive: true, force: true })
})

function play(
  change: { startAt?: number; rate?: number | null; state?: boolean; recording?: boolean } = {},
): Streaming {
  const options = {
    url: server.url,
    keys: { FW: 'prefix.secret' },
    keysFile: 'keys.json',
    stateDirectory: change.state ? folder : null,
    startAt: change.startAt ?? clock.now(),
    rate: change.rate ?? null,
  }
  const samples = Array.from({ length: 13 }, (_, n) => [n, n + 0.5, null])
  const sensors = ['A', 'B', 'C'].map((id) => ({ id, kind: 'surface' as const }))
  const source = change.recording
    ? recordingSource({ sampleRate: 4, sensors, samples }, 'FW', options.startAt)
    : seaSource(sea, fairway)
  streaming = stream(
    [source],
    options,
    (time) => linkStands(time),
    clock,
    (sentence) => said.push(sentence),
  )
  return streaming
}

describe('a station that connects', () => {
  it('says who it is and sends a frame as each second ends, none before', async () => {
    play()
    const connection = await server.connection()
    expect(connection.authorization).toBe('Bearer prefix.secret')
    expect(connection.hello).toMatchObject({ station: 'FW', sampleRate: 2 })
    expect(connection.hello.sensors).toEqual(
      fairway.sensors.map(({ letter }) => ({ id: letter, kind: 'pressure', unit: 'dbar' })),
    )
    connection.welcome(1)
    await connection.ping()
    clock.turn(3000)
    const frames = await connection.frames(3)
    expect(frames.map(({ seq }) => seq)).toEqual([1, 2, 3])
    expect(frames[0]).toMatchObject({
      start: '2026-11-12T14:30:00.000Z',
      interval: 0.5,
      sensors: ['FW-1', 'FW-2', 'FW-3', 'FW-4'],
    })
    expect(frames.map(({ values }) => values)).toEqual(
      [0, 1, 2].map((n) => seaSource(sea, fairway).valuesAt(start + 1000 * n)),
    )
  })

  it('sends its back-fill in order at no more than fifty frames a second, then goes live', async () => {
    play({ startAt: start - 120_000 })
    const connection = await server.connection()
    connection.welcome(1)
    await connection.frames(1)
    clock.turn(1000)
    const first = (await connection.frames(40)).length
    expect(first).toBeLessThanOrEqual(50)
    clock.turn(2000)
    const frames = await connection.frames(123)
    expect(frames.map(({ seq }) => seq)).toEqual(Array.from({ length: 123 }, (_, n) => n + 1))
    expect(frames[0].start).toBe('2026-11-12T14:28:00.000Z')
    clock.turn(1000)
    expect((await connection.frames(124))[123].start).toBe('2026-11-12T14:30:03.000Z')
  })

  it('streams the past faster than time when told to, and never beyond now', async () => {
    play({ startAt: start - 60_000, rate: 30 })
    const connection = await server.connection()
    connection.welcome(1)
    await connection.ping()
    clock.turn(1000)
    const frames = await connection.frames(29)
    expect(frames.length).toBeLessThanOrEqual(31)
    clock.turn(4000)
    const all = await connection.frames(65)
    expect(all).toHaveLength(65)
    expect(all[64].start).toBe('2026-11-12T14:30:04.000Z')
  })
})

describe('a link that is lost', () => {
  it('is taken up again, and what was not acknowledged is sent again, the same', async () => {
    play()
    const first = await server.connection()
    first.welcome(1)
    await first.ping()
    clock.turn(5000)
    const sent = [...(await first.frames(5))]
    first.cut()
    await first.ended
    const again = await reconnected()
    expect(again.hello.stream).toBe(first.hello.stream)
    again.welcome(3)
    const resent = await again.frames(3)
    expect(resent.slice(0, 3).map(({ seq, start, values }) => ({ seq, start, values }))).toEqual(
      sent.slice(2).map(({ seq, start, values }) => ({ seq, start, values })),
    )
  })

  it('waits while the scenario has the link down, and fills the gap afterwards', async () => {
    linkStands = (time) => time < start + 2000 || time >= start + 30_000
    play()
    const first = await server.connection()
    first.welcome(1)
    await first.ping()
    clock.turn(4000)
    await first.ended
    const again = await reconnected()
    expect(clock.now()).toBeGreaterThanOrEqual(start + 30_000)
    again.welcome(2)
    const frames = await again.frames(20)
    expect(frames[0].start).toBe('2026-11-12T14:30:01.000Z')
    expect(said).toContainEqual(expect.stringContaining('the link is down'))
  })

  it.each([
    { code: 4401, word: 'Issue a new key for FW and put it into keys.json' },
    { code: 4403, word: 'retired' },
    { code: 4409, word: 'does not fit the deployment' },
    { code: 4410, word: 'another connection' },
  ])('closed with $code ends the station with a clear sentence', async ({ code, word }) => {
    const { ended } = play()
    const connection = await server.connection()
    connection.close(code, 'because')
    expect(await ended).toBe(false)
    expect(said[said.length - 1]).toContain(word)
    expect(said[said.length - 1]).toContain('because')
  })
})

describe('a station that is started again', () => {
  it('goes on with its stream where it was, with the same frames for the same numbers', async () => {
    play({ state: true, startAt: start - 10_000 })
    const first = await server.connection()
    first.welcome(1)
    await first.frames(1)
    clock.turn(2000)
    const sent = [...(await first.frames(12))]
    streaming?.stop()
    await first.ended
    clock.turn(20_000)
    play({ state: true })
    const second = await server.connection()
    expect(second.hello.stream).toBe(first.hello.stream)
    second.welcome(8)
    await second.frames(1)
    clock.turn(1000)
    const resent = await second.frames(26)
    expect(resent[0]).toMatchObject({ seq: 8, start: sent[7].start, values: sent[7].values })
    expect(resent.map(({ start: time }) => Date.parse(time))).toEqual(
      Array.from({ length: resent.length }, (_, n) => Date.parse(sent[7].start) + 1000 * n),
    )
  })

  it('leaves a gap in time, none in its numbers, after a long stop', async () => {
    play({ state: true })
    const first = await server.connection()
    first.welcome(1)
    await first.ping()
    clock.turn(2000)
    await first.frames(2)
    streaming?.stop()
    await first.ended
    clock.turn(3_600_000)
    play({ state: true })
    const second = await server.connection()
    second.welcome(3)
    await second.frames(1)
    clock.turn(10_000)
    const frames = await second.frames(100)
    const gap = frames.findIndex(
      ({ start: time }, n) => n > 0 && Date.parse(time) - Date.parse(frames[n - 1].start) > 1000,
    )
    expect(frames.map(({ seq }) => seq)).toEqual(frames.map((_, n) => n + 3))
    expect(Date.parse(frames[gap].start)).toBe(clock.now() - 10_000 - 120_000)
  })

  it('begins a new stream when the server wants frames that are not kept', async () => {
    play({ state: true })
    const first = await server.connection()
    first.welcome(500)
    await first.ended
    const second = await reconnected()
    expect(second.hello.stream).not.toBe(first.hello.stream)
  })
})

describe('a recording', () => {
  it('is sent whole, in whole seconds, and ends when it is acknowledged', async () => {
    const { ended } = play({ recording: true, startAt: start - 3000 })
    const connection = await server.connection()
    connection.welcome(1)
    await connection.frames(1)
    clock.turn(1000)
    const frames = await connection.frames(3)
    expect(frames[1].values).toEqual([
      [4, 5, 6, 7],
      [4.5, 5.5, 6.5, 7.5],
      [null, null, null, null],
    ])
    connection.say({ type: 'ack', seq: 3 })
    expect(await ended).toBe(true)
  })
})

/** Turns the clock, as the network needs it, until the station is back. */
async function reconnected() {
  const next = server.connection()
  let back = false
  void next.then(() => (back = true))
  while (!back) {
    clock.turn(500)
    await new Promise((resolve) => setImmediate(resolve))
  }
  return next
}

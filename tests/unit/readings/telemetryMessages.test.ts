import { describe, expect, it } from 'vitest'
import { createClockWatch } from '../../../server/sockets/telemetry/clockWatch.ts'
import { createPace } from '../../../server/sockets/telemetry/pace.ts'
import { readMessage } from '../../../server/sockets/telemetry/readMessage.ts'
import { seeded } from '../../support/seeded.ts'

const frame = {
  type: 'frame',
  seq: 7,
  start: '2026-12-01T06:00:00.000Z',
  interval: 0.25,
  sensors: ['A', 'B'],
  values: [
    [1, 2, 3, 4],
    [5, null, 7, 8],
  ],
  sentAt: '2026-12-01T06:00:01.000Z',
}
const read = (message: unknown) => readMessage(Buffer.from(JSON.stringify(message)), false)

describe('a message of a station', () => {
  it('is read when it is a frame as laid down', () => {
    expect(read(frame)).toEqual({ kind: 'frame', frame })
  })

  it.each([
    ['a number as text', { ...frame, values: [['1', 2, 3, 4], frame.values[1]] }, 7],
    ['a value out of range', { ...frame, values: [[1e308, 2, 3, 4], frame.values[1]] }, 7],
    ['series of different length', { ...frame, values: [[1, 2, 3], frame.values[1]] }, 7],
    ['less than a quarter of a second', { ...frame, interval: 0.01 }, 7],
    ['more than a minute', { ...frame, interval: 16 }, 7],
    ['an unknown field', { ...frame, colour: 'blue' }, 7],
    ['a number below 1', { ...frame, seq: 0 }, null],
    ['a number with a fraction', { ...frame, seq: 1.5 }, null],
    ['a number too large to count', { ...frame, seq: 2 ** 53 }, null],
    ['another type', { ...frame, type: 'greeting' }, null],
    ['no object', 'frame', null],
    ['nothing', null, null],
  ])('with %s is malformed', (_, message, seq) => {
    expect(read(message)).toEqual({ kind: 'malformed', seq, detail: expect.stringMatching(/./) })
  })

  it('that is binary, no JSON or not UTF-8 is malformed', () => {
    for (const bytes of ['', '{', '[1,', '\u0000', 'NaN', '{"type":"frame","seq":NaN}']) {
      expect(readMessage(Buffer.from(bytes), false)).toMatchObject({ kind: 'malformed', seq: null })
    }
    expect(readMessage(Buffer.from([0xff, 0xfe, 0x7b]), false)).toMatchObject({ kind: 'malformed' })
    expect(readMessage(Buffer.from(JSON.stringify(frame)), true)).toMatchObject({ kind: 'malformed' })
  })

  it('nested ten thousand deep, or aimed at the prototype, does no harm', () => {
    const deep = `${'['.repeat(10_000)}${']'.repeat(10_000)}`
    expect(readMessage(Buffer.from(deep), false)).toMatchObject({ kind: 'malformed' })
    const aimed = `{"__proto__":{"polluted":1},"constructor":{"prototype":{"polluted":1}},${JSON.stringify(frame).slice(1)}`
    expect(readMessage(Buffer.from(aimed), false).kind).toBe('malformed')
    expect('polluted' in {}).toBe(false)
  })

  it('damaged at random is either read as laid down or malformed, and never anything else', () => {
    const random = seeded(4711)
    const whole = Buffer.from(JSON.stringify(frame))
    for (let n = 0; n < 10_000; n++) {
      const bytes = Buffer.from(whole)
      for (let hits = 1 + Math.floor(random() * 6); hits > 0; hits--) {
        bytes[Math.floor(random() * bytes.length)] = Math.floor(random() * 256)
      }
      const message = readMessage(
        bytes.subarray(0, random() < 0.2 ? Math.floor(random() * bytes.length) : undefined),
        false,
      )
      expect(['frame', 'hello', 'malformed']).toContain(message.kind)
      if (message.kind !== 'frame') continue
      for (const value of message.frame.values.flat()) expect(value === null || Number.isFinite(value)).toBe(true)
    }
  })
})

describe('the pace of a station', () => {
  it('allows a reserve at once, then fifty times real time with its grace', () => {
    const pace = createPace()
    expect(pace.takeRecord(600, 0)).toBe(true)
    expect(pace.takeRecord(1, 0)).toBe(false)
    expect(pace.takeRecord(62.5, 1000)).toBe(true)
    expect(pace.takeRecord(1, 1000)).toBe(false)
  })

  it('does not gather more than its reserve while a station is silent', () => {
    const pace = createPace()
    pace.takeRecord(600, 0)
    expect(pace.takeRecord(600, 3_600_000)).toBe(true)
    expect(pace.takeRecord(1, 3_600_000)).toBe(false)
  })

  it('counts messages too', () => {
    const pace = createPace()
    for (let n = 0; n < 2000; n++) expect(pace.takeMessage(0)).toBe(true)
    expect(pace.takeMessage(0)).toBe(false)
    expect(pace.takeMessage(4)).toBe(true)
  })
})

describe("the watch on a station's clock", () => {
  it('tells the median, so that one message held up on its way is no news', () => {
    const watch = createClockWatch()
    const told = [0, 0, 0, 0, 0, 30, 0, 0, 0, 0].map((delay, n) => watch.note(n * 1000, (n + 2 + delay) * 1000))
    expect(told.filter((offset) => offset !== null)).toEqual([2])
    expect(watch.offset()).toBe(2)
  })

  it('tells a step of the clock once it is the rule', () => {
    const watch = createClockWatch()
    const told = Array.from({ length: 60 }, (_, n) => watch.note(n * 1000, n * 1000 + (n < 30 ? 0 : 5000)))
    expect(told.filter((offset) => offset !== null)).toEqual([0, 5])
  })
})

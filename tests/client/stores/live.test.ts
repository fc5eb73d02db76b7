import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { pauseBefore, silenceMs } from '../../../src/api/liveSocket.ts'
import { useLive } from '../../../src/stores/live.ts'
import type { LiveEvent } from '../../../src/stores/live.ts'
import { useServerClock } from '../../../src/stores/serverClock.ts'
import { useSession } from '../../../src/stores/session.ts'
import { FakeServer, FakeWebSocket, settle } from '../support/fakeServer.ts'
import { session } from '../support/views.ts'

const event = (seq: number, body: unknown = seq, room = 'system'): LiveEvent => ({
  type: 'event',
  room,
  seq,
  kind: 'job',
  body,
})

function joinRoom() {
  const applied: unknown[] = []
  const answers: (() => void)[] = []
  const live = useLive()
  const leave = live.join('system', {
    hydrate: () => new Promise<void>((resolve) => answers.push(() => (applied.push('rest'), resolve()))),
    apply: ({ body }) => void applied.push(body),
  })
  return { live, applied, answers, leave }
}

describe('live connection', () => {
  beforeEach(() => {
    vi.useFakeTimers({ now: Date.parse('2026-11-12T14:32:07.000Z') })
    setActivePinia(createPinia())
    new FakeServer().install()
  })
  afterEach(() => {
    vi.useRealTimers()
    vi.unstubAllGlobals()
  })

  it('subscribes, keeps events aside while REST is asked, and applies them after it', async () => {
    const { live, applied, answers } = joinRoom()
    live.connect()
    FakeWebSocket.last.accept()
    expect(FakeWebSocket.last.sent).toEqual([{ type: 'subscribe', rooms: ['system'] }])
    FakeWebSocket.last.grant('system', 4)
    FakeWebSocket.last.say(event(5))
    FakeWebSocket.last.say(event(6))
    expect(applied).toEqual([])
    answers[0]?.()
    await settle()
    FakeWebSocket.last.say(event(7))
    expect(applied).toEqual(['rest', 5, 6, 7])
  })

  it('fetches again when the sequence has a hole', async () => {
    const { live, applied, answers } = joinRoom()
    live.connect()
    FakeWebSocket.last.accept()
    FakeWebSocket.last.grant('system', 0)
    answers[0]?.()
    await settle()
    FakeWebSocket.last.say(event(1))
    FakeWebSocket.last.say(event(4))
    expect(answers).toHaveLength(2)
    answers[1]?.()
    await settle()
    expect(applied).toEqual(['rest', 1, 'rest', 4])
  })

  it('applies an event only once when it is sent twice', async () => {
    const { live, applied, answers } = joinRoom()
    live.connect()
    FakeWebSocket.last.accept()
    FakeWebSocket.last.grant('system', 0)
    answers[0]?.()
    await settle()
    FakeWebSocket.last.say(event(1))
    FakeWebSocket.last.say(event(1))
    expect(applied).toEqual(['rest', 1])
  })

  it('subscribes and fetches anew after a server that was lost has come back', async () => {
    const { live, applied, answers } = joinRoom()
    live.connect()
    FakeWebSocket.last.accept('first')
    FakeWebSocket.last.grant('system', 90)
    answers[0]?.()
    await settle()
    FakeWebSocket.last.end(1012)
    expect(live.contactLost).toBe(true)
    await vi.advanceTimersByTimeAsync(600)
    expect(FakeWebSocket.opened).toHaveLength(2)
    FakeWebSocket.last.accept('second')
    FakeWebSocket.last.grant('system', 0)
    answers[1]?.()
    await settle()
    FakeWebSocket.last.say(event(1))
    expect(live.contactLost).toBe(false)
    expect(applied).toEqual(['rest', 'rest', 1])
  })

  it('asks REST again when that has failed', async () => {
    const live = useLive()
    let asked = 0
    live.join('system', {
      hydrate: () => (++asked === 1 ? Promise.reject(new Error('down')) : Promise.resolve()),
      apply: () => undefined,
    })
    live.connect()
    FakeWebSocket.last.accept()
    FakeWebSocket.last.grant('system', 0)
    await vi.advanceTimersByTimeAsync(3_100)
    expect(asked).toBe(2)
  })

  it('fetches by REST alone where no live connection comes up', async () => {
    const { live, applied, answers } = joinRoom()
    live.connect()
    FakeWebSocket.last.end(1006)
    answers[0]?.()
    await settle()
    expect(applied).toEqual(['rest'])
  })

  it('holds a silent connection for lost', async () => {
    const { live } = joinRoom()
    live.connect()
    FakeWebSocket.last.accept()
    await vi.advanceTimersByTimeAsync(silenceMs + 100)
    expect(live.contactLost).toBe(true)
  })

  it('counts the silence by the server and holds figures back after a minute of it', async () => {
    const clock = useServerClock()
    clock.start()
    const { live } = joinRoom()
    live.connect()
    FakeWebSocket.last.accept()
    FakeWebSocket.last.end(1006)
    await vi.advanceTimersByTimeAsync(59_000)
    expect(live.figuresHeld).toBe(false)
    await vi.advanceTimersByTimeAsync(2_000)
    expect(live.figuresHeld).toBe(true)
    expect(live.silentForMs).toBe(61_000)
    clock.stop()
  })

  it('ends the session and does not come back by itself when the server refuses it', async () => {
    const { live } = joinRoom()
    const person = useSession()
    person.apply(session())
    live.connect()
    FakeWebSocket.last.accept()
    FakeWebSocket.last.end(4401)
    await vi.advanceTimersByTimeAsync(60_000)
    expect(person.state).toBe('ended')
    expect(FakeWebSocket.opened).toHaveLength(1)
    live.connect()
    expect(FakeWebSocket.opened).toHaveLength(2)
  })

  it('turns the session read-only when the server says so', () => {
    const { live } = joinRoom()
    const person = useSession()
    person.apply(session())
    live.connect()
    FakeWebSocket.last.accept()
    FakeWebSocket.last.say({ type: 'session', state: 'readOnly' })
    expect(person.readOnly).toBe(true)
    expect(person.state).toBe('in')
  })

  it('leaves a room when nobody looks at it any more', () => {
    const { live, leave } = joinRoom()
    live.connect()
    FakeWebSocket.last.accept()
    leave()
    expect(FakeWebSocket.last.sent.at(-1)).toEqual({ type: 'unsubscribe', rooms: ['system'] })
  })
})

describe('pauses between attempts', () => {
  it('double up to 20 s and are spread over their upper half', () => {
    expect([pauseBefore(0, 0), pauseBefore(0, 1)]).toEqual([250, 500])
    expect([pauseBefore(3, 0), pauseBefore(3, 1)]).toEqual([2_000, 4_000])
    expect([pauseBefore(40, 0), pauseBefore(40, 1)]).toEqual([10_000, 20_000])
  })
})

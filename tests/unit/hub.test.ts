import { describe, expect, it } from 'vitest'
import { createHub, slowAfterMs, slowFrom, stalledAfterMs, thinFrom } from '../../server/sockets/hub.ts'
import type { Listener } from '../../server/sockets/hub.ts'
import { liveServerMessage } from '../../shared/wire/live.ts'

function arrange() {
  let time = 0
  const hub = createHub({ epoch: 'e1', clock: { monotonic: () => time } })
  return { hub, pass: (ms: number) => (time += ms) }
}

/** A connection whose queue the test holds in its hand. */
function listener() {
  const state = { sent: [] as string[], queued: 0, closed: null as number | null }
  const connection: Listener = {
    send: (text) => void state.sent.push(text),
    queuedBytes: () => state.queued,
    close: (code) => void (state.closed = code),
  }
  const events = () =>
    state.sent.map((text) => {
      const message = liveServerMessage.parse(JSON.parse(text))
      if (message.type !== 'event') throw new Error(`not an event: ${text}`)
      return message
    })
  return { connection, state, events }
}

describe('the rooms of the live feed', () => {
  it('count their events each for itself, and tell a newcomer the number of the last one', () => {
    const { hub } = arrange()
    const desk = listener()
    hub.publish('stations', 'station', 'unheard')
    expect(hub.join(desk.connection, 'stations')).toBe(1)
    expect(hub.join(desk.connection, 'system')).toBe(0)

    hub.publish('stations', 'station', { id: 4 })
    hub.publish('system', 'job', { id: 9 })

    expect(desk.events()).toEqual([
      { type: 'event', room: 'stations', seq: 2, kind: 'station', body: { id: 4 } },
      { type: 'event', room: 'system', seq: 1, kind: 'job', body: { id: 9 } },
    ])
  })

  it('send nothing to who has left or was forgotten', () => {
    const { hub } = arrange()
    const [one, two] = [listener(), listener()]
    for (const { connection } of [one, two]) {
      hub.join(connection, 'stations')
      hub.join(connection, 'system')
    }
    hub.leave(one.connection, 'stations')
    hub.forget(two.connection)
    hub.publish('stations', 'station', 1)
    hub.publish('system', 'job', 2)
    expect(one.events().map((event) => event.room)).toEqual(['system'])
    expect(two.state.sent).toEqual([])
    expect(hub.isHeard('stations')).toBe(false)
    expect(hub.isHeard('system')).toBe(true)
  })
})

describe('a listener that reads slowly', () => {
  it('gets the latest of each kind and subject when its queue drains, and can see the hole', () => {
    const { hub } = arrange()
    const desk = listener()
    hub.join(desk.connection, 'stations')
    hub.publish('stations', 'estimate', 'first', 7)
    desk.state.queued = thinFrom + 1
    for (const body of ['second', 'third']) hub.publish('stations', 'estimate', body, 7)
    hub.publish('stations', 'estimate', 'of another station', 8)
    hub.publish('stations', 'estimate', 'fourth', 7)
    hub.relieve()
    expect(desk.events().map((event) => event.body)).toEqual(['first'])

    desk.state.queued = thinFrom
    hub.relieve()

    expect(desk.events().map((event) => [event.seq, event.body])).toEqual([
      [1, 'first'],
      [4, 'of another station'],
      [5, 'fourth'],
    ])
  })

  it('keeps the order: nothing new overtakes what is held back', () => {
    const { hub } = arrange()
    const desk = listener()
    hub.join(desk.connection, 'stations')
    desk.state.queued = thinFrom + 1
    hub.publish('stations', 'station', 'held')
    desk.state.queued = 0
    hub.publish('stations', 'estimate', 'new')
    hub.relieve()
    expect(desk.events().map((event) => event.seq)).toEqual([1, 2])
  })

  it('is sent away after five seconds over the limit, and not when it caught up in between', () => {
    const { hub, pass } = arrange()
    const [slow, recovering] = [listener(), listener()]
    for (const { connection, state } of [slow, recovering]) {
      hub.join(connection, 'stations')
      state.queued = slowFrom + 1
    }
    hub.relieve()
    pass(slowAfterMs - 1)
    recovering.state.queued = 0
    hub.relieve()
    expect(slow.state.closed).toBeNull()
    recovering.state.queued = slowFrom + 1
    pass(1)
    hub.relieve()
    expect(slow.state.closed).toBe(4008)
    expect(recovering.state.closed).toBeNull()
    expect(hub.roomsOf(slow.connection)).toEqual([])
  })

  it('is sent away when nothing at all leaves for ten seconds, though little waits', () => {
    const { hub, pass } = arrange()
    const dead = listener()
    hub.join(dead.connection, 'stations')
    dead.state.queued = thinFrom + 1
    hub.relieve()
    pass(stalledAfterMs)
    hub.relieve()
    expect(dead.state.closed).toBe(4008)
  })
})

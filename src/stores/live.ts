/**
 * The live connection and its rooms. A room is subscribed first, its events are kept aside while REST is asked, and
 * then applied; a hole in the sequence or a new epoch of the server starts that again.
 */
import { defineStore } from 'pinia'
import { computed, ref } from 'vue'
import { openLiveSocket } from '../api/liveSocket.ts'
import type { LiveSocket } from '../api/liveSocket.ts'
import type { LiveServerMessage } from '../../shared/wire/live.ts'
import { useServerClock } from './serverClock.ts'
import { useSession } from './session.ts'

export type LiveEvent = Extract<LiveServerMessage, { type: 'event' }>

export interface RoomListener {
  /** Fetches by REST all that the room shows; called after every subscription. */
  hydrate(): Promise<void>
  apply(event: LiveEvent): void
}

interface Room {
  listener: RoomListener
  /** Sequence number of the last event that was taken in; null before the subscription was granted. */
  seq: number | null
  hydrating: boolean
  everHydrated: boolean
  waiting: LiveEvent[]
}

/** `lost` while the next attempt is awaited; `idle` when nobody is signed in. */
export type LiveState = 'idle' | 'connecting' | 'open' | 'lost'

/** Without a word from the server for so long, live figures are hatched. */
export const hatchAfterMs = 60_000
const hydrateAgainMs = 3_000
/** Older ones are covered by the REST answer that is being waited for. */
const mostWaiting = 400

export const useLive = defineStore('live', () => {
  const clock = useServerClock()
  const session = useSession()
  const state = ref<LiveState>('idle')
  /** Server time of the last message; null before the first. */
  const lastHeardMs = ref<number | null>(null)
  const rooms = new Map<string, Room>()
  let socket: LiveSocket | null = null
  let epoch: string | null = null

  const contactLost = computed(() => state.value === 'lost')
  const silentForMs = computed(() => Math.max(0, clock.nowMs - (lastHeardMs.value ?? clock.nowMs)))
  /** Figures on the screen can no longer be called live. */
  const figuresHeld = computed(() => contactLost.value && silentForMs.value >= hatchAfterMs)

  function connect(): void {
    if (socket) return socket.hurry()
    lastHeardMs.value ??= clock.nowMs
    state.value = 'connecting'
    socket = openLiveSocket({ opened: () => undefined, message: hear, closed: lose })
  }

  function disconnect(): void {
    socket?.close()
    socket = null
    state.value = 'idle'
  }

  /** A fresh connection under the session that holds now. */
  function reconnect(): void {
    disconnect()
    connect()
  }

  function lose(refused: boolean): void {
    for (const room of rooms.values()) {
      room.seq = null
      room.waiting = []
      // Where the live connection never came up, REST alone still gives a first picture.
      if (!refused && !room.everHydrated) void hydrate(room)
    }
    if (refused) {
      socket = null
      state.value = 'lost'
      return session.end()
    }
    if (state.value !== 'idle') state.value = 'lost'
  }

  function hear(message: LiveServerMessage): void {
    lastHeardMs.value = clock.read()
    switch (message.type) {
      case 'hello':
        clock.hear(Date.parse(message.serverTime))
        lastHeardMs.value = clock.read()
        if (message.readOnly) session.becomeReadOnly()
        state.value = 'open'
        if (epoch !== message.epoch) epoch = message.epoch
        if (rooms.size > 0) socket?.send({ type: 'subscribe', rooms: [...rooms.keys()] })
        return
      case 'time':
        return clock.hear(Date.parse(message.serverTime))
      case 'session':
        return message.state === 'readOnly' ? session.becomeReadOnly() : session.end()
      case 'subscribed':
        for (const granted of message.rooms) {
          const room = rooms.get(granted.room)
          if (!room) continue
          room.seq = granted.seq
          room.waiting = []
          void hydrate(room)
        }
        return
      case 'event':
        return receive(message)
    }
  }

  function receive(event: LiveEvent): void {
    const room = rooms.get(event.room)
    if (!room || room.seq === null || event.seq <= room.seq) return
    const hole = event.seq !== room.seq + 1
    room.seq = event.seq
    if (hole && !room.hydrating) void hydrate(room)
    if (room.hydrating) room.waiting = [...room.waiting.slice(-mostWaiting), event]
    else room.listener.apply(event)
  }

  async function hydrate(room: Room): Promise<void> {
    room.hydrating = true
    const seqBefore = room.seq
    try {
      await room.listener.hydrate()
      room.everHydrated = true
    } catch {
      setTimeout(() => {
        if (state.value === 'open' && isCurrent(room) && room.seq !== null) void hydrate(room)
      }, hydrateAgainMs)
      return
    }
    // A newer subscription has started its own round: its events are applied at its end.
    if (seqBefore !== null && room.seq === null) return
    room.hydrating = false
    for (const event of room.waiting.splice(0)) room.listener.apply(event)
  }

  const isCurrent = (room: Room): boolean => [...rooms.values()].includes(room)

  /** Joins a room; the answer leaves it. */
  function join(name: string, listener: RoomListener): () => void {
    const room: Room = { listener, seq: null, hydrating: false, everHydrated: false, waiting: [] }
    rooms.set(name, room)
    if (state.value === 'open') socket?.send({ type: 'subscribe', rooms: [name] })
    else if (state.value === 'lost') void hydrate(room)
    return () => {
      if (rooms.get(name) !== room) return
      rooms.delete(name)
      socket?.send({ type: 'unsubscribe', rooms: [name] })
    }
  }

  return { state, lastHeardMs, contactLost, silentForMs, figuresHeld, connect, reconnect, disconnect, join }
})

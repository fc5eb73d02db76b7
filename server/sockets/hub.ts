/**
 * Rooms and who listens in them. Every room counts its events within one epoch (one start of the server), so that a
 * listener sees a hole. A listener that reads too slowly gets only the latest of each kind, and is sent away when
 * even that does not drain.
 */
import type { LiveServerMessage } from '../../shared/wire/live.ts'
import type { Clock } from '../config/clock.ts'

/** More than this waiting in the process for one listener: only the latest of each kind is kept for it. */
export const thinFrom = 256 * 1024
/** More than this, sent and held back, for `slowAfterMs`: it is closed as a slow consumer. */
export const slowFrom = 1024 * 1024
export const slowAfterMs = 5_000
/** Nothing at all has left for so long while events were held back: closed too. */
export const stalledAfterMs = 10_000
export const slowConsumerCode = 4008

/** One open connection, as the hub needs it. */
export interface Listener {
  send(text: string): void
  /** Bytes accepted by `send` that have not left the process. */
  queuedBytes(): number
  close(code: number, reason: string): void
}

export interface Hub {
  readonly epoch: string
  /** Answers the number of the room's last event; 0 before the first. */
  join(listener: Listener, room: string): number
  leave(listener: Listener, room: string): void
  /** Out of all rooms, and nothing held back for it any more. */
  forget(listener: Listener): void
  roomsOf(listener: Listener): string[]
  isHeard(room: string): boolean
  /** `subject` tells apart what of one kind stands beside each other: the latest of each is kept. */
  publish(room: string, kind: string, body: unknown, subject?: string | number): void
  /** An event that could not be made: the room counts on, so that its listeners see the hole and fetch. */
  skip(room: string): void
  /** Sends what was held back where there is room again, and closes those who stay slow. Called by a timer. */
  relieve(): void
}

interface Seat {
  rooms: Set<string>
  /** Latest event of each kind, in the order of their last arrival. */
  held: Map<string, string>
  slowSince: number | null
  stalledSince: number | null
}

const heldBytes = (seat: Seat): number => [...seat.held.values()].reduce((sum, text) => sum + text.length, 0)

export function createHub({ epoch, clock }: { epoch: string; clock: Pick<Clock, 'monotonic'> }): Hub {
  const seats = new Map<Listener, Seat>()
  const rooms = new Map<string, { seq: number; listeners: Set<Listener> }>()

  function seatOf(listener: Listener): Seat {
    const known = seats.get(listener)
    if (known) return known
    const seat: Seat = { rooms: new Set(), held: new Map(), slowSince: null, stalledSince: null }
    seats.set(listener, seat)
    return seat
  }

  function roomNamed(name: string) {
    const known = rooms.get(name)
    if (known) return known
    const room = { seq: 0, listeners: new Set<Listener>() }
    rooms.set(name, room)
    return room
  }

  function forget(listener: Listener): void {
    for (const room of seats.get(listener)?.rooms ?? []) rooms.get(room)?.listeners.delete(listener)
    seats.delete(listener)
  }

  function deliver(listener: Listener, slot: string, text: string): void {
    const seat = seatOf(listener)
    if (seat.held.size === 0 && listener.queuedBytes() <= thinFrom) {
      listener.send(text)
      return
    }
    seat.held.delete(slot)
    seat.held.set(slot, text)
  }

  function drain(listener: Listener, seat: Seat): void {
    for (const [slot, text] of seat.held) {
      if (listener.queuedBytes() > thinFrom) return
      listener.send(text)
      seat.held.delete(slot)
    }
  }

  /** Judged before anything more is sent, so that a link that moves at all is seen to move. */
  function isTooSlow(listener: Listener, seat: Seat): boolean {
    const now = clock.monotonic()
    const queued = listener.queuedBytes()
    seat.stalledSince = queued > thinFrom ? (seat.stalledSince ?? now) : null
    seat.slowSince = queued + heldBytes(seat) > slowFrom ? (seat.slowSince ?? now) : null
    const isSlow = seat.slowSince !== null && now - seat.slowSince >= slowAfterMs
    return isSlow || (seat.stalledSince !== null && now - seat.stalledSince >= stalledAfterMs)
  }

  return {
    epoch,
    join(listener, room) {
      seatOf(listener).rooms.add(room)
      const { listeners, seq } = roomNamed(room)
      listeners.add(listener)
      return seq
    },
    leave(listener, room) {
      seats.get(listener)?.rooms.delete(room)
      rooms.get(room)?.listeners.delete(listener)
    },
    forget,
    roomsOf: (listener) => [...(seats.get(listener)?.rooms ?? [])],
    isHeard: (room) => (rooms.get(room)?.listeners.size ?? 0) > 0,
    publish(name, kind, body, subject = '') {
      const room = roomNamed(name)
      room.seq += 1
      if (room.listeners.size === 0) return
      const event: LiveServerMessage = { type: 'event', room: name, seq: room.seq, kind, body }
      const text = JSON.stringify(event)
      for (const listener of room.listeners) deliver(listener, `${name} ${kind} ${subject}`, text)
    },
    skip(name) {
      roomNamed(name).seq += 1
    },
    relieve() {
      for (const [listener, seat] of [...seats]) {
        if (isTooSlow(listener, seat)) {
          forget(listener)
          listener.close(slowConsumerCode, 'slow consumer')
        } else {
          drain(listener, seat)
        }
      }
    },
  }
}

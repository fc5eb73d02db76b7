/** One open browser: whose session it is, which rooms it may hear, and whether it still answers. */
import type { WebSocket } from 'ws'
import { actionOfRoom, may } from '../../../shared/access.ts'
import { liveClientMessage } from '../../../shared/wire/live.ts'
import type { LiveServerMessage } from '../../../shared/wire/live.ts'
import type { Caller } from '../../services/sessions.ts'
import { thinFrom } from '../hub.ts'
import type { Hub, Listener } from '../hub.ts'

export const liveClose = {
  serverRestarts: 1012,
  malformed: 4400,
  sessionEnded: 4401,
  noPong: 4408,
  tooFast: 4429,
} as const

const mostRooms = 200
/** A page subscribes a few times; more than this between two heartbeats is a fault. */
const mostMessages = 200
const pongsMissed = 2

export class Viewer implements Listener {
  private missed = 0
  private messages = 0

  constructor(
    private readonly socket: WebSocket,
    private readonly hub: Hub,
    private caller: Caller,
  ) {
    socket.on('pong', () => (this.missed = 0))
    socket.on('message', (data, isBinary) => this.take(isBinary ? null : String(data)))
  }

  get sessionId(): string {
    return this.caller.sessionId
  }

  get personId(): number {
    return this.caller.person.id
  }

  send(text: string): void {
    if (this.socket.readyState === this.socket.OPEN) this.socket.send(text)
  }

  queuedBytes(): number {
    return this.socket.bufferedAmount
  }

  close(code: number, reason: string): void {
    this.hub.forget(this)
    this.socket.close(code, reason)
    // A browser that reads nothing does not take the close either.
    if (this.queuedBytes() > thinFrom) this.socket.terminate()
  }

  say(message: LiveServerMessage): void {
    this.send(JSON.stringify(message))
  }

  greet(serverTime: string): void {
    const { readOnly, absoluteUntil } = this.caller
    this.say({ type: 'hello', epoch: this.hub.epoch, serverTime, readOnly, absoluteUntil: absoluteUntil.toISOString() })
  }

  /** Once a heartbeat. False: it has not answered and is gone. */
  beat(serverTime: string): boolean {
    this.messages = 0
    if (this.missed >= pongsMissed) {
      this.hub.forget(this)
      this.socket.terminate()
      return false
    }
    this.missed += 1
    this.socket.ping()
    this.say({ type: 'time', serverTime })
    return true
  }

  /** The session as it stands now; null: it is over. */
  renew(caller: Caller | null): void {
    if (!caller) return this.end()
    const turnsReadOnly = caller.readOnly && !this.caller.readOnly
    this.caller = caller
    if (turnsReadOnly) this.say({ type: 'session', state: 'readOnly' })
    for (const room of this.hub.roomsOf(this)) if (this.refusal(room)) this.hub.leave(this, room)
  }

  /** The session has ended: nothing more is sent but this. */
  end(): void {
    this.say({ type: 'session', state: 'ended' })
    this.close(liveClose.sessionEnded, 'the session has ended')
  }

  private refusal(room: string): string | null {
    const action = actionOfRoom(room)
    if (action === null) return 'there is no such room'
    if (this.caller.mustEnrol) return 'a second factor is to be set up first'
    return may(this.caller.person.role, action) ? null : 'your role does not allow this'
  }

  private take(text: string | null): void {
    this.messages += 1
    if (this.messages > mostMessages) return this.close(liveClose.tooFast, 'too many messages')
    const message = liveClientMessage.safeParse(text === null ? null : parsed(text))
    if (!message.success) return this.close(liveClose.malformed, 'not a message of this socket')
    if (message.data.type === 'subscribe') this.subscribe(message.data.rooms)
    else for (const room of message.data.rooms) this.hub.leave(this, room)
  }

  private subscribe(wanted: string[]): void {
    const rooms: { room: string; seq: number }[] = []
    const refused: { room: string; reason: string }[] = []
    for (const room of wanted) {
      const isFull = this.hub.roomsOf(this).length >= mostRooms
      const reason = this.refusal(room) ?? (isFull ? 'too many rooms' : null)
      if (reason) refused.push({ room, reason })
      else rooms.push({ room, seq: this.hub.join(this, room) })
    }
    this.say({ type: 'subscribed', rooms, refused })
  }
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text)
  } catch {
    return null
  }
}

/** The websocket to `/live`: opened, read, watched for silence and opened again with growing, jittered pauses. */
import { liveServerMessage } from '../../shared/wire/live.ts'
import type { LiveClientMessage, LiveServerMessage } from '../../shared/wire/live.ts'

export interface LiveSocketListeners {
  opened(): void
  /** Every readable message, in order. */
  message(message: LiveServerMessage): void
  /** `refused`: the server ended the session (4401) and is not asked again. */
  closed(refused: boolean): void
}

export interface LiveSocket {
  send(message: LiveClientMessage): boolean
  /** Opens now instead of waiting for the pause to end. */
  hurry(): void
  close(): void
}

/** The server speaks at least every 15 s; twice that and a little more is silence. */
export const silenceMs = 35_000
const shortestPauseMs = 500
const longestPauseMs = 20_000

/** Half to the whole of a pause that doubles, so that many desks do not come back at one instant. */
export function pauseBefore(attempt: number, dice: number): number {
  const whole = Math.min(longestPauseMs, shortestPauseMs * 2 ** Math.min(attempt, 10))
  return whole * (0.5 + 0.5 * dice)
}

export function liveUrl(location: { protocol: string; host: string }): string {
  return `${location.protocol === 'https:' ? 'wss:' : 'ws:'}//${location.host}/live`
}

export function openLiveSocket(listeners: LiveSocketListeners, dice: () => number = Math.random): LiveSocket {
  let socket: WebSocket | null = null
  let attempt = 0
  let ended = false
  let pause: ReturnType<typeof setTimeout> | undefined
  let silence: ReturnType<typeof setTimeout> | undefined

  const listenForSilence = (from: WebSocket) => {
    clearTimeout(silence)
    silence = setTimeout(() => lost(from, false), silenceMs)
  }

  const open = () => {
    clearTimeout(pause)
    if (ended || socket) return
    const opening = new WebSocket(liveUrl(window.location))
    socket = opening
    listenForSilence(opening)
    opening.onopen = () => {
      if (socket === opening) listeners.opened()
    }
    opening.onmessage = (event) => {
      if (socket !== opening) return
      listenForSilence(opening)
      const message = readMessage(event.data)
      if (!message) return
      if (message.type === 'hello') attempt = 0
      listeners.message(message)
    }
    opening.onclose = (event) => lost(opening, event.code === 4401)
  }

  const lost = (from: WebSocket, refused: boolean) => {
    if (socket !== from) return
    clearTimeout(silence)
    socket = null
    from.onopen = from.onmessage = from.onclose = null
    from.close()
    listeners.closed(refused)
    if (refused) ended = true
    if (!ended) pause = setTimeout(open, pauseBefore(attempt++, dice()))
  }

  open()
  return {
    send(message) {
      if (socket?.readyState !== WebSocket.OPEN) return false
      socket.send(JSON.stringify(message))
      return true
    },
    hurry: open,
    close() {
      ended = true
      clearTimeout(pause)
      if (socket) lost(socket, false)
    },
  }
}

function readMessage(frame: unknown): LiveServerMessage | null {
  if (typeof frame !== 'string') return null
  try {
    const parsed = liveServerMessage.safeParse(JSON.parse(frame))
    return parsed.success ? parsed.data : null
  } catch {
    return null
  }
}

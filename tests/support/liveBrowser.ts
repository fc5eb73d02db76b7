/** A browser's live socket in a test: everything it heard, in order. */
import { WebSocket } from 'ws'
import { liveServerMessage } from '../../shared/wire/live.ts'
import type { LiveClientMessage, LiveServerMessage } from '../../shared/wire/live.ts'

type LiveEvent = Extract<LiveServerMessage, { type: 'event' }>

export interface LiveBrowser {
  socket: WebSocket
  heard: LiveServerMessage[]
  events(): LiveEvent[]
  say(message: LiveClientMessage | string): void
  /** Subscribes and waits for the answer. */
  join(...rooms: string[]): Promise<Extract<LiveServerMessage, { type: 'subscribed' }>>
  /** The next message for which this holds, of those heard so far too. */
  next(holds: (message: LiveServerMessage) => boolean): Promise<LiveServerMessage>
  /** The code it was or will be closed with. */
  closed: Promise<number>
}

/** Resolves when the socket is open; rejects with the status that refused it. */
export function openLive(url: string, headers: Record<string, string>): Promise<LiveBrowser> {
  const socket = new WebSocket(url, { headers, perMessageDeflate: false })
  const heard: LiveServerMessage[] = []
  const waiting: { holds: (message: LiveServerMessage) => boolean; resolve: (m: LiveServerMessage) => void }[] = []
  socket.on('message', (data) => {
    const message = liveServerMessage.parse(JSON.parse(String(data)))
    heard.push(message)
    for (const one of waiting.filter(({ holds }) => holds(message))) one.resolve(message)
  })
  const closed = new Promise<number>((resolve) => socket.once('close', (code) => resolve(code)))
  const next: LiveBrowser['next'] = (holds) => {
    const known = heard.find(holds)
    return known ? Promise.resolve(known) : new Promise((resolve) => waiting.push({ holds, resolve }))
  }
  const say: LiveBrowser['say'] = (message) =>
    socket.send(typeof message === 'string' ? message : JSON.stringify(message))
  const browser: LiveBrowser = {
    socket,
    heard,
    events: () => heard.filter((message) => message.type === 'event'),
    say,
    next,
    closed,
    async join(...rooms) {
      const before = heard.length
      say({ type: 'subscribe', rooms })
      const answer = await next((message) => message.type === 'subscribed' && heard.indexOf(message) >= before)
      if (answer.type !== 'subscribed') throw new Error('not an answer to subscribe')
      return answer
    },
  }
  return new Promise((resolve, reject) => {
    socket.once('open', () => resolve(browser))
    socket.once('unexpected-response', (_request, response) => reject(new Error(`refused: ${response.statusCode}`)))
    socket.on('error', reject)
  })
}

/** Live: what changes goes out to the browsers that are signed in. They send nothing but the rooms they want. */
import { randomUUID } from 'node:crypto'
import type { IncomingMessage } from 'node:http'
import type { Duplex } from 'node:stream'
import { WebSocketServer } from 'ws'
import { isOwnOrigin } from '../config/origins.ts'
import type { Parts, RunningPart } from '../config/parts.ts'
import { tokenOfCookieHeader } from '../config/sessionCookie.ts'
import { callerOfSession, identify } from '../services/sessions.ts'
import type { Caller } from '../services/sessions.ts'
import { createHub } from './hub.ts'
import { startNewscast } from './live/newscast.ts'
import { liveClose, Viewer } from './live/viewer.ts'
import { refuseUpgrade } from './upgrade.ts'
import type { UpgradeDispatcher } from './upgrade.ts'

const path = '/live'
const largestMessage = 8 * 1024
const mostViewers = 2_000
const mostOfOnePerson = 40
const heartbeatMs = 15_000
const relieveMs = 500
const closeWithinMs = 1_000

export interface LiveOptions {
  upgrades: UpgradeDispatcher
  /** Without timers: only `beat` and `relieve` are called. */
  isUntimed?: boolean
}

export interface Live extends RunningPart {
  /** Pings, tells the time, asks every session anew; resolves when all have been asked. */
  beat(): Promise<void>
  /** Sends what was held back for slow browsers, and closes those that stay slow. */
  relieve(): void
  /** Resolves when all news so far has been sent. */
  settled(): Promise<void>
}

export async function startLive(parts: Parts, { upgrades, isUntimed = false }: LiveOptions): Promise<Live> {
  const { bus, clock, environment, logger } = parts
  const sockets = new WebSocketServer({ noServer: true, maxPayload: largestMessage, perMessageDeflate: false })
  const hub = createHub({ epoch: randomUUID(), clock })
  const newscast = startNewscast(parts, hub)
  const viewers = new Set<Viewer>()
  const serverTime = () => clock.now().toISOString()

  /** Who asks, or the status that refuses the upgrade. A page of another site cannot get past its Origin. */
  async function admit({ headers }: IncomingMessage): Promise<Caller | number> {
    if (headers.origin === undefined || !isOwnOrigin(environment, headers.origin)) return 403
    const token = tokenOfCookieHeader(environment, headers.cookie)
    const caller = token === null ? null : await identify(parts, token)
    if (!caller) return 401
    const own = [...viewers].filter(({ personId }) => personId === caller.person.id)
    return viewers.size >= mostViewers || own.length >= mostOfOnePerson ? 503 : caller
  }

  function accept(request: IncomingMessage, socket: Duplex, head: Buffer): void {
    void admit(request)
      .catch((error: unknown) => {
        logger.warn({ error }, 'a browser could not be let in')
        return 503
      })
      .then((answer) => {
        if (typeof answer === 'number') return refuseUpgrade(socket, answer)
        sockets.handleUpgrade(request, socket, head, (websocket) => {
          const viewer = new Viewer(websocket, hub, answer)
          viewers.add(viewer)
          websocket.on('error', () => websocket.terminate())
          websocket.on('close', () => {
            viewers.delete(viewer)
            hub.forget(viewer)
          })
          viewer.greet(serverTime())
          // Its session may have ended while it was let in.
          void askAgain(viewer)
        })
      })
  }

  /** Asked of the database: the session may have ended, its role or its reading rights changed. */
  async function askAgain(viewer: Viewer): Promise<void> {
    try {
      viewer.renew(await callerOfSession(parts, viewer.sessionId))
    } catch (error) {
      logger.warn({ error }, 'a session could not be asked for; it is asked again at the next heartbeat')
    }
  }

  async function beat(): Promise<void> {
    const alive = [...viewers].filter((viewer) => viewer.beat(serverTime()))
    await Promise.all(alive.map(askAgain))
    await newscast.tellStations().catch((error: unknown) => logger.warn({ error }, 'stations could not be told'))
  }

  const subscriptions = [
    bus.subscribe('session.ended', ({ sessionId }) => {
      for (const viewer of [...viewers]) if (viewer.sessionId === sessionId) viewer.end()
    }),
    bus.subscribe('person.changed', ({ personId }) => {
      for (const viewer of [...viewers]) if (viewer.personId === personId) void askAgain(viewer)
    }),
  ]
  const unroute = upgrades.route(path, accept)
  const timers = isUntimed
    ? []
    : [setInterval(() => void beat(), heartbeatMs), setInterval(() => hub.relieve(), relieveMs)]

  return {
    beat,
    relieve: () => hub.relieve(),
    settled: () => newscast.settled(),
    async stop() {
      unroute()
      for (const timer of timers) clearInterval(timer)
      for (const unsubscribe of subscriptions) unsubscribe()
      newscast.stop()
      await newscast.settled()
      await closeAll(sockets)
    },
  }
}

async function closeAll(sockets: WebSocketServer): Promise<void> {
  const closed = [...sockets.clients].map((socket) => {
    const gone = new Promise<void>((resolve) => socket.once('close', () => resolve()))
    socket.close(liveClose.serverRestarts, 'the server stops')
    return gone
  })
  let timer: NodeJS.Timeout | undefined
  const patience = new Promise((resolve) => (timer = setTimeout(resolve, closeWithinMs)))
  await Promise.race([Promise.all(closed), patience])
  clearTimeout(timer)
  for (const socket of sockets.clients) socket.terminate()
}

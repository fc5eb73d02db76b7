/** Telemetry: stations send their readings in, and hear what is durable. */
import type { IncomingMessage } from 'node:http'
import type { Duplex } from 'node:stream'
import { WebSocketServer } from 'ws'
import type { RawData, WebSocket } from 'ws'
import { heartbeatSeconds, maxFrameBytes, telemetryClose, telemetryProtocol } from '../../shared/wire/telemetry.ts'
import type { Parts } from '../config/parts.ts'
import { createReadingStore, noteConnected } from '../services/readings.ts'
import type { ReadingStore } from '../services/readings.ts'
import { forgetConnections, noteAttempt } from '../services/connections.ts'
import { examineKey } from '../services/stationKeys.ts'
import { Connection } from './telemetry/connection.ts'
import { createPace } from './telemetry/pace.ts'
import type { Pace } from './telemetry/pace.ts'
import type { StreamingStation, Surroundings } from './telemetry/surroundings.ts'
import { refuseUpgrade } from './upgrade.ts'
import type { UpgradeDispatcher } from './upgrade.ts'

const path = '/telemetry'
const mostConnections = 500
const helloWithinMs = 10_000
const beatsBetweenChecks = 4
/** Messages that may wait while a connection is let in. */
const mostEarlyMessages = 50
const closeWithinMs = 2_000

export interface TelemetryOptions extends Pick<Parts, 'bus' | 'clock' | 'logger'> {
  upgrades: UpgradeDispatcher
  heartbeatMs?: number
  betweenCommitsMs?: number
}

export interface Telemetry {
  store: ReadingStore
  stop(): Promise<void>
}

export async function startTelemetry(options: TelemetryOptions): Promise<Telemetry> {
  const { bus, clock, logger, upgrades, heartbeatMs = heartbeatSeconds * 1000 } = options
  const { betweenCommitsMs } = options
  const store = await createReadingStore({ bus, clock, logger, betweenCommitsMs })
  forgetConnections()
  const sockets = new WebSocketServer({ noServer: true, maxPayload: maxFrameBytes, perMessageDeflate: false })
  const connections = new Map<WebSocket, Connection>()
  const streaming = new Map<number, StreamingStation>()
  const paces = new Map<number, Pace>()

  const around: Surroundings = {
    clock,
    bus,
    store,
    paceOf(stationId) {
      const pace = paces.get(stationId) ?? createPace()
      paces.set(stationId, pace)
      return pace
    },
    welcomed(connection) {
      streaming.get(connection.stationId)?.close(telemetryClose.replaced, 'replaced by a newer connection')
      streaming.set(connection.stationId, connection)
      noteConnected(connection.stationId, true)
      bus.publish('link.changed', { stationId: connection.stationId })
      logger.info({ stationId: connection.stationId }, 'a station is connected')
    },
  }

  function accept(request: IncomingMessage, socket: Duplex, head: Buffer): void {
    const offered = (request.headers['sec-websocket-protocol'] ?? '').split(',').map((name) => name.trim())
    if (!offered.includes(telemetryProtocol)) return refuseUpgrade(socket, 400)
    if (sockets.clients.size >= mostConnections) return refuseUpgrade(socket, 503)
    sockets.handleUpgrade(request, socket, head, (websocket) => {
      void serve(websocket, request.headers.authorization ?? '', request.socket.remoteAddress ?? 'unknown')
    })
  }

  /** Messages wait their turn while the one before is worked on, and so does the sender. */
  async function serve(socket: WebSocket, authorization: string, remoteAddress: string): Promise<void> {
    const attempt = noteAttempt({ clock, bus }, remoteAddress)
    let turn: Promise<void> = Promise.resolve()
    let connection: Connection | null = null
    let early = 0
    const inTurn = (work: () => Promise<void>): void => {
      turn = turn.then(work).catch((error: unknown) => {
        logger.warn({ error, stationId: connection?.stationId }, 'a station could not be served')
        socket.close(telemetryClose.tryAgainLater, 'not now')
      })
    }
    const hurry = setTimeout(() => {
      if (!connection?.isStreaming) socket.close(telemetryClose.malformed, 'no hello within 10 s')
    }, helloWithinMs)
    socket.on('error', () => socket.terminate())
    socket.on('close', (code, reason) => {
      clearTimeout(hurry)
      attempt.ended(code, connection?.closeReason ?? reason.toString())
      if (connection) forget(socket, connection, code)
    })
    socket.on('message', (message, isBinary) => {
      if (!connection?.isStreaming && (early += 1) > mostEarlyMessages) {
        return socket.close(telemetryClose.malformed, 'wait for welcome')
      }
      inTurn(async () => connection?.take(bytesOf(message), isBinary))
    })
    inTurn(async () => {
      const [, key = ''] = /^Bearer (\S{1,200})$/.exec(authorization) ?? []
      const examined = await examineKey({ clock }, key)
      attempt.keyExamined(examined)
      if (!examined.holder) return socket.close(telemetryClose.keyRefused, 'the key is unknown or revoked')
      connection = new Connection(socket, examined.holder, around, attempt)
      connections.set(socket, connection)
    })
    return turn
  }

  function forget(socket: WebSocket, connection: Connection, code: number): void {
    connections.delete(socket)
    const { stationId } = connection
    if (streaming.get(stationId) !== connection) return
    streaming.delete(stationId)
    noteConnected(stationId, false)
    bus.publish('link.changed', { stationId })
    logger.info({ stationId, code }, 'a station is gone')
  }

  const check = (connection: Connection): void =>
    void connection.checkStation().catch((error: unknown) => logger.warn({ error }, 'a station could not be checked'))

  let beats = 0
  const heartbeat = setInterval(() => {
    beats += 1
    for (const connection of connections.values()) {
      connection.beat()
      if (beats % beatsBetweenChecks > 0) continue
      check(connection)
    }
  }, heartbeatMs)

  const subscriptions = [
    bus.subscribe('stationKey.revoked', ({ keyId }) => {
      for (const connection of connections.values()) {
        if (connection.key.keyId === keyId) connection.close(telemetryClose.keyRefused, 'the key was revoked')
      }
    }),
    bus.subscribe('station.changed', ({ stationId }) => {
      for (const connection of connections.values()) if (connection.stationId === stationId) check(connection)
    }),
  ]
  const unroute = upgrades.route(path, accept)

  return {
    store,
    async stop() {
      unroute()
      for (const unsubscribe of subscriptions) unsubscribe()
      clearInterval(heartbeat)
      for (const socket of sockets.clients) socket.pause()
      await store.stop()
      await closeAll(sockets)
    },
  }
}

const bytesOf = (message: RawData): Buffer =>
  Buffer.isBuffer(message) ? message : Array.isArray(message) ? Buffer.concat(message) : Buffer.from(message)

/** What is durable has been acknowledged by now; the rest is sent again to the next start. */
async function closeAll(sockets: WebSocketServer): Promise<void> {
  const closed = [...sockets.clients].map(
    (socket) => new Promise<void>((resolve) => socket.once('close', () => resolve())),
  )
  for (const socket of sockets.clients) {
    socket.resume()
    socket.close(telemetryClose.serverRestarts, 'the server stops')
  }
  let timer: NodeJS.Timeout | undefined
  const patience = new Promise((resolve) => (timer = setTimeout(resolve, closeWithinMs)))
  await Promise.race([Promise.all(closed), patience])
  clearTimeout(timer)
  for (const socket of sockets.clients) socket.terminate()
}

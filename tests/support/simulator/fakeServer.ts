/** A telemetry server of a few lines: hears stations, says what the test tells it to. Every message can be waited for. */
import type { AddressInfo } from 'node:net'
import { WebSocketServer, type WebSocket } from 'ws'
import type { FrameMessage, HelloMessage, TelemetryServerMessage } from '../../../shared/wire/telemetry.ts'
import { helloMessage, frameMessage, telemetryProtocol } from '../../../shared/wire/telemetry.ts'

export interface FakeConnection {
  hello: HelloMessage
  authorization: string | undefined
  say(message: TelemetryServerMessage): void
  welcome(resumeFrom: number): void
  /** The frames that have come, once there are so many. */
  frames(count: number): Promise<FrameMessage[]>
  close(code: number, reason?: string): void
  cut(): void
  /** Resolves when the station has read everything said to it so far. */
  ping(): Promise<void>
  ended: Promise<void>
}

export interface FakeServer {
  url: string
  /** The next station that says hello. */
  connection(): Promise<FakeConnection>
  stop(): Promise<void>
}

export async function fakeServer(): Promise<FakeServer> {
  const server = new WebSocketServer({
    host: '127.0.0.1',
    port: 0,
    handleProtocols: (offered) => (offered.has(telemetryProtocol) ? telemetryProtocol : false),
  })
  await new Promise((resolve) => server.once('listening', resolve))
  const waiting: FakeConnection[] = []
  let wanted: ((connection: FakeConnection) => void) | null = null
  server.on('connection', (socket, request) => {
    receive(socket, request.headers.authorization, (connection) => {
      if (wanted) wanted(connection)
      else waiting.push(connection)
      wanted = null
    })
  })
  const { port } = server.address() as AddressInfo
  return {
    url: `ws://127.0.0.1:${port}/telemetry`,
    connection: () => {
      const first = waiting.shift()
      return first ? Promise.resolve(first) : new Promise((resolve) => (wanted = resolve))
    },
    stop() {
      for (const socket of server.clients) socket.terminate()
      return new Promise((resolve) => server.close(() => resolve()))
    },
  }
}

function receive(
  socket: WebSocket,
  authorization: string | undefined,
  greet: (connection: FakeConnection) => void,
): void {
  const frames: FrameMessage[] = []
  let arrived = () => {}
  const say = (message: TelemetryServerMessage) => socket.send(JSON.stringify(message))
  const ended = new Promise<void>((resolve) => socket.once('close', () => resolve()))
  socket.once('message', (content) => {
    greet({
      hello: helloMessage.parse(JSON.parse(String(content))),
      authorization,
      say,
      welcome: (resumeFrom) =>
        say({
          type: 'welcome',
          resumeFrom,
          serverTime: new Date(0).toISOString(),
          heartbeatSeconds: 15,
          maxFrameBytes: 65536,
        }),
      frames: (count) =>
        new Promise((resolve) => {
          arrived = () => frames.length >= count && resolve(frames)
          arrived()
        }),
      close: (code, reason) => socket.close(code, reason),
      cut: () => socket.terminate(),
      ping() {
        const answered = new Promise<void>((resolve) => socket.once('pong', () => resolve()))
        socket.ping()
        return answered
      },
      ended,
    })
    socket.on('message', (next) => {
      frames.push(frameMessage.parse(JSON.parse(String(next))))
      arrived()
    })
  })
}

/** A telemetry server on loopback and a station's side of the link, for tests. */
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { WebSocket } from 'ws'
import type { Parts } from '../../server/config/parts.ts'
import { startTelemetry } from '../../server/sockets/telemetry.ts'
import type { Telemetry } from '../../server/sockets/telemetry.ts'
import { createUpgradeDispatcher } from '../../server/sockets/upgrade.ts'
import { telemetryProtocol, telemetryServerMessage } from '../../shared/wire/telemetry.ts'
import type { TelemetryServerMessage } from '../../shared/wire/telemetry.ts'
import type { StationMade } from './factories.ts'

export interface TelemetryServer extends Telemetry {
  url: string
}

export async function serveTelemetry(
  parts: Parts,
  heartbeatMs = 60_000,
  betweenCommitsMs = 10,
): Promise<TelemetryServer> {
  const server = createServer()
  const telemetry = await startTelemetry({
    ...parts,
    upgrades: createUpgradeDispatcher(server),
    heartbeatMs,
    betweenCommitsMs,
  })
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const { port } = server.address() as AddressInfo
  return {
    ...telemetry,
    url: `ws://127.0.0.1:${port}`,
    async stop() {
      await telemetry.stop()
      await new Promise((resolve) => server.close(resolve))
    },
  }
}

export interface StationLink {
  messages: TelemetryServerMessage[]
  socket: WebSocket
  send(message: unknown): void
  sendRaw(message: string | Buffer): void
  /** The next message of a type that has not been waited for yet. */
  next<Type extends TelemetryServerMessage['type']>(
    type: Type,
  ): Promise<Extract<TelemetryServerMessage, { type: Type }>>
  /** Resolves when this number, or a higher one, is acknowledged. */
  acknowledged(seq: number): Promise<void>
  /** Code and reason of the close. */
  closed: Promise<{ code: number; reason: string }>
  close(): Promise<void>
}

export interface LinkOptions {
  path?: string
  protocol?: string
  autoPong?: boolean
}

const patienceMs = 8_000

export async function openLink(
  url: string,
  key: string | null,
  { path = '/telemetry', protocol = telemetryProtocol, autoPong = true }: LinkOptions = {},
): Promise<StationLink> {
  const headers = key === null ? {} : { authorization: `Bearer ${key}` }
  const socket = new WebSocket(url + path, protocol, { headers, autoPong })
  const messages: TelemetryServerMessage[] = []
  const taken = new Set<TelemetryServerMessage>()
  const listeners = new Set<() => void>()
  socket.on('message', (text: Buffer) => {
    messages.push(telemetryServerMessage.parse(JSON.parse(text.toString())))
    for (const listener of listeners) listener()
  })
  const closed = new Promise<{ code: number; reason: string }>((resolve) => {
    socket.on('close', (code, reason) => resolve({ code, reason: reason.toString() }))
  })
  await new Promise<void>((resolve, reject) => {
    socket.once('open', () => resolve())
    socket.once('error', reject)
  })
  socket.on('error', () => undefined)

  /** The first of the messages, now or later, that `pick` picks. */
  function awaited<Picked>(what: string, pick: () => Picked | undefined): Promise<Picked> {
    return new Promise((resolve, reject) => {
      const look = (): boolean => {
        const picked = pick()
        if (picked === undefined) return false
        clearTimeout(timer)
        listeners.delete(look)
        resolve(picked)
        return true
      }
      const timer = setTimeout(() => {
        listeners.delete(look)
        reject(new Error(`${what} did not come; there came ${JSON.stringify(messages.slice(-5))}`))
      }, patienceMs)
      if (!look()) listeners.add(look)
    })
  }

  return {
    messages,
    socket,
    send: (message) => socket.send(JSON.stringify(message)),
    sendRaw: (message) => socket.send(message),
    next(type) {
      return awaited(type, () => {
        const found = messages.find((message) => message.type === type && !taken.has(message))
        if (found) taken.add(found)
        return found as Extract<TelemetryServerMessage, { type: typeof type }> | undefined
      })
    },
    async acknowledged(seq) {
      await awaited(`ack ${seq}`, () => messages.find((message) => message.type === 'ack' && message.seq >= seq))
    },
    closed,
    async close() {
      socket.close()
      await closed
    },
  }
}

export interface HelloWanted {
  stream: string
  sentAt?: Date
}

/** What a station says first when all is as deployed. */
export const helloOf = ({ station, sensors }: StationMade, { stream, sentAt }: HelloWanted) => ({
  type: 'hello',
  station: station.code,
  stream,
  software: 'test station 1',
  sampleRate: station.sampleRate,
  sensors: sensors.map(({ letter }) => ({ id: letter, kind: 'pressure', unit: 'dbar' })),
  sentAt: (sentAt ?? new Date('2026-12-01T06:00:00Z')).toISOString(),
})

/** The reading of a sensor at a time: made up, but the same for the same arguments, in whole ten-thousandths. */
export const readingAt = (sensor: number, timeMs: number): number =>
  Math.round((9 + sensor + 0.7 * Math.sin(timeMs / 1300) + 0.2 * Math.sin(timeMs / 377 + sensor)) * 1e4) / 1e4

export interface FrameWanted {
  seq: number
  start: Date
  seconds?: number
  sentAt?: Date
  /** Adds to every reading, for other content. */
  shift?: number
}

export function frameOf(
  { station, sensors }: StationMade,
  { seq, start, seconds = 1, sentAt, shift = 0 }: FrameWanted,
) {
  const interval = 1 / station.sampleRate
  const count = Math.round(seconds * station.sampleRate)
  const timeOf = (n: number) => start.getTime() + n * interval * 1000
  return {
    type: 'frame' as const,
    seq,
    start: start.toISOString(),
    interval,
    sensors: sensors.map(({ letter }) => letter),
    values: sensors.map((_, index) =>
      Array.from({ length: count }, (_, n): number | null => readingAt(index, timeOf(n)) + shift),
    ),
    sentAt: (sentAt ?? new Date(start.getTime() + seconds * 1000)).toISOString(),
  }
}

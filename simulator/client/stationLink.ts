/**
 * One station's logger: keeps its telemetry socket, sends a frame a second, sends again from where the server says,
 * and takes a lost link for what it is, a while in which frames wait.
 */
import { WebSocket } from 'ws'
import { telemetryProtocol, telemetryServerMessage, type TelemetryServerMessage } from '../../shared/wire/telemetry.ts'
import type { SimulatorClock } from '../clock.ts'
import { afterClose } from './closeReason.ts'
import { frameMilliseconds, type FrameSource } from './frameSource.ts'
import type { Ledger } from './ledger.ts'
import type { Pace } from './pace.ts'

export interface StationLinkWanted {
  source: FrameSource
  ledger: Ledger
  pace: Pace
  clock: SimulatorClock
  url: string
  key: string
  keysFile: string
  /** Newest moment that the instruments have lived to, ms since 1970: now, or less while the past is streamed. */
  instrumentTime: () => number
  /** Whether the radio link stands at a time; it always does unless the scenario breaks it. */
  linkStands: (time: number) => boolean
  /** 0 to 1, for the jitter of reconnecting. */
  chance: () => number
  say: (sentence: string) => void
  /** Called once: all of a recording is acknowledged, or the server wants no more of this station. */
  onEnd: (end: { failed: boolean; why: string }) => void
}

export interface StationLink {
  stop(): void
}

/** Frames on the way without acknowledgement, and bytes waiting in the socket, before it waits itself. */
const mostUnacknowledged = 2000
const mostBuffered = 256 * 1024
const tickMilliseconds = 100
const longestBackOff = 30

export function keepStationLink(wanted: StationLinkWanted): StationLink {
  const { source, ledger, pace, clock, say } = wanted
  let socket: WebSocket | null = null
  let welcomed = false
  let nextSeq = 1
  let failures = 0
  let heardAt = clock.now()
  let silenceLimit = 60_000
  let waiting: (() => void) | null = null
  let over = false
  /** HTTP status of a refused handshake, and the socket's last complaint. */
  let refusedAt = 0
  let lastError = ''

  const stopTicking = clock.every(tickMilliseconds, tick)
  connect()

  function tick(): void {
    const now = clock.now()
    if (socket && !wanted.linkStands(now)) {
      say(`${source.code}: the link is down; frames wait`)
      socket.terminate()
    } else if (socket && now - heardAt > silenceLimit) {
      say(`${source.code}: nothing heard for ${Math.round((now - heardAt) / 1000)} s`)
      socket.terminate()
    } else if (welcomed) sendWhatIsDue(now)
  }

  function connect(): void {
    waiting = null
    if (over) return
    const now = clock.now()
    if (!wanted.linkStands(now)) {
      waiting = clock.after(1000, connect)
      return
    }
    if (!ledger.canSend(ledger.acknowledged() + 1, now)) startAnew('frames have waited longer than a day')
    heardAt = now
    const opened = new WebSocket(wanted.url, telemetryProtocol, {
      headers: { Authorization: `Bearer ${wanted.key}` },
      perMessageDeflate: false,
      handshakeTimeout: 15_000,
      maxPayload: 64 * 1024,
    })
    socket = opened
    opened.on('open', () => opened.send(JSON.stringify(hello())))
    opened.on('ping', () => (heardAt = clock.now()))
    opened.on('message', (content) => socket === opened && hear(String(content)))
    opened.on('unexpected-response', (_request, response) => {
      refusedAt = response.statusCode ?? 0
      opened.terminate()
    })
    opened.on('error', (error) => (lastError = error.message))
    opened.on('close', (closeCode, reason) => socket === opened && lost(closeCode, String(reason)))
  }

  function startAnew(why: string): void {
    ledger.renew(clock.now())
    say(`${source.code}: a new stream begins: ${why}`)
  }

  const hello = () => ({
    type: 'hello',
    station: source.code,
    stream: ledger.stream(),
    software: 'offing simulator',
    sampleRate: source.sampleRate,
    sensors: source.sensors.map(({ id, kind }) => ({ id, kind, unit: kind === 'pressure' ? 'dbar' : 'm' })),
    sentAt: new Date(clock.now()).toISOString(),
  })

  function hear(content: string): void {
    heardAt = clock.now()
    const message = parseMessage(content)
    if (!message) return say(`${source.code}: a message that is none of the protocol's: ${content.slice(0, 80)}`)
    if (message.type === 'welcome') welcome(message.resumeFrom, message.heartbeatSeconds)
    else if (message.type === 'ack') acknowledge(message.seq)
    else if (message.type === 'refused')
      say(`${source.code}: frame ${message.seq ?? '?'} refused (${message.code}): ${message.detail}`)
    else if (Math.abs(message.offsetSeconds) > 1) {
      say(`${source.code}: the server finds this clock ${message.offsetSeconds.toFixed(1)} s off`)
    }
  }

  function welcome(resumeFrom: number, heartbeatSeconds: number): void {
    silenceLimit = heartbeatSeconds * 3000
    if (!ledger.canSend(resumeFrom, clock.now())) {
      startAnew(`the server wants frame ${resumeFrom}, which is not kept`)
      socket?.close(1000)
      return
    }
    failures = 0
    welcomed = true
    nextSeq = resumeFrom
    ledger.acknowledge(resumeFrom - 1)
    say(`${source.code}: connected, frames from ${resumeFrom}, ${new Date(ledger.startOf(resumeFrom)).toISOString()}`)
    sendWhatIsDue(clock.now())
  }

  function acknowledge(seq: number): void {
    if (seq > ledger.acknowledged() && seq < nextSeq) ledger.acknowledge(seq)
    const { endsAt } = source
    if (endsAt !== null && ledger.startOf(seq + 1) + frameMilliseconds > endsAt)
      end(false, `${source.code}: all of the recording is acknowledged`)
  }

  function sendWhatIsDue(now: number): void {
    const until = Math.min(now, wanted.instrumentTime(), source.endsAt ?? Infinity)
    while (
      socket?.readyState === WebSocket.OPEN &&
      ledger.startOf(nextSeq) + frameMilliseconds <= until &&
      nextSeq - ledger.acknowledged() <= mostUnacknowledged &&
      socket.bufferedAmount < mostBuffered &&
      pace.take(now)
    ) {
      ledger.reserve(nextSeq)
      socket.send(JSON.stringify(frame(nextSeq, now)))
      nextSeq++
    }
  }

  function frame(seq: number, now: number) {
    const start = ledger.startOf(seq)
    return {
      type: 'frame',
      seq,
      start: new Date(start).toISOString(),
      interval: 1 / source.sampleRate,
      sensors: source.sensors.map(({ id }) => id),
      values: source.valuesAt(start),
      sentAt: new Date(now).toISOString(),
    }
  }

  function lost(closeCode: number, reason: string): void {
    socket = null
    welcomed = false
    if (over) return
    const refused = refusedAt === 401 ? 4401 : refusedAt === 403 ? 4403 : 0
    const next = afterClose(refused || closeCode, refused ? '' : reason || lastError, source.code, wanted.keysFile)
    refusedAt = 0
    lastError = ''
    if (!next.again) return end(true, next.why)
    if (next.slower) pace.slowDown()
    const backOff = Math.min(longestBackOff, next.leastSeconds * 2 ** Math.min(failures, 6)) * (0.5 + wanted.chance())
    if (failures === 0 || failures % 10 === 0) say(`${source.code}: ${next.why}; trying again`)
    failures++
    waiting = clock.after(1000 * backOff, connect)
  }

  function end(failed: boolean, why: string): void {
    if (over) return
    shut()
    wanted.onEnd({ failed, why })
  }

  function shut(): void {
    over = true
    stopTicking()
    waiting?.()
    ledger.save()
    if (socket?.readyState === WebSocket.CONNECTING) socket.terminate()
    else socket?.close(1000)
  }

  return { stop: shut }
}

function parseMessage(content: string): TelemetryServerMessage | null {
  try {
    const parsed = telemetryServerMessage.safeParse(JSON.parse(content))
    return parsed.success ? parsed.data : null
  } catch {
    return null
  }
}

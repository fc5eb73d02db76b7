/** A station that writes down what it was promised: each frame it sent, and each that the server acknowledged. */
import { randomUUID } from 'node:crypto'
import WebSocket from 'ws'
import type { DemonstrationStation } from '../../shared/demonstration/stations.ts'
import { telemetryProtocol, telemetryServerMessage } from '../../shared/wire/telemetry.ts'
import { hashed } from './chance.ts'

/** A little under what the server allows of back-fill. */
const timesRealTime = 45
const reconnectMilliseconds = 150

export interface History {
  /** Second since 1970 UTC of the first frame; frame seq holds second `firstSecond + seq - 1`. */
  firstSecond: number
  sent: number
  acknowledged: number
  refusals: string[]
  /** Promises that the server did not keep on the wire, in words. */
  broken: string[]
  connections: number
}

/** The value of a sensor's sample, to the resolution that the store keeps. */
export function sampleOf(letter: string, second: number, index: number): number {
  return Math.round((12 + hashed(letter, second, index)) * 10_000) / 10_000
}

export interface RecordingStation {
  history: History
  stop(): void
}

export function startRecordingStation(options: {
  station: DemonstrationStation
  url: string
  key: string
  firstSecond: number
}): RecordingStation {
  const { station, url, key, firstSecond } = options
  const history: History = { firstSecond, sent: 0, acknowledged: 0, refusals: [], broken: [], connections: 0 }
  const stream = randomUUID()
  const letters = station.sensors.map(({ letter }) => letter)
  let next = Infinity
  let stopped = false
  let socket: WebSocket

  const frame = (seq: number) => {
    const second = firstSecond + seq - 1
    const values = letters.map((letter) =>
      Array.from({ length: station.sampleRate }, (_, index) => sampleOf(letter, second, index)),
    )
    const start = new Date(second * 1000).toISOString()
    const sentAt = new Date().toISOString()
    return { type: 'frame', seq, start, interval: 1 / station.sampleRate, sensors: letters, values, sentAt }
  }

  function hear(text: string): void {
    const message = telemetryServerMessage.parse(JSON.parse(text))
    if (message.type === 'welcome') {
      if (message.resumeFrom <= history.acknowledged) {
        history.broken.push(`asked again for ${message.resumeFrom} after acknowledging ${history.acknowledged}`)
      }
      next = message.resumeFrom
    } else if (message.type === 'ack') {
      if (message.seq > history.sent) history.broken.push(`acknowledged ${message.seq}, sent were ${history.sent}`)
      history.acknowledged = Math.max(history.acknowledged, message.seq)
    } else if (message.type === 'refused') {
      history.refusals.push(`${message.seq}: ${message.code} ${message.detail}`)
    }
  }

  function connect(): void {
    if (stopped) return
    next = Infinity
    socket = new WebSocket(url, telemetryProtocol, { headers: { authorization: `Bearer ${key}` } })
    const sensors = station.sensors.map(({ letter, kind }) => ({
      id: letter,
      kind,
      unit: kind === 'surface' ? 'm' : 'dbar',
    }))
    socket.on('open', () => {
      history.connections += 1
      const { code, sampleRate } = station
      const hello = { type: 'hello', station: code, stream, software: 'recording station 1', sampleRate, sensors }
      socket.send(JSON.stringify({ ...hello, sentAt: new Date().toISOString() }))
    })
    socket.on('message', (text) => hear(String(text)))
    socket.on('error', () => undefined)
    socket.on('close', () => setTimeout(connect, reconnectMilliseconds))
  }

  const timer = setInterval(() => {
    const complete = Math.floor(Date.now() / 1000) - firstSecond
    for (let burst = 0; burst < timesRealTime / 10 && next <= complete; burst += 1, next += 1) {
      if (socket.readyState !== WebSocket.OPEN) return
      socket.send(JSON.stringify(frame(next)))
      history.sent = Math.max(history.sent, next)
    }
  }, 100)
  connect()
  return {
    history,
    stop() {
      stopped = true
      clearInterval(timer)
      socket.terminate()
    },
  }
}

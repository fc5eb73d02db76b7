/**
 * The load process: every station's side of the telemetry socket and the viewers' live sockets, apart from the server. Its one argument
 * names a JSON file with what to do; each ten seconds it writes what it saw as a line of JSON, and a last one at the end.
 */
import { randomUUID } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { setTimeout as pause } from 'node:timers/promises'
import { WebSocket } from 'ws'
import { z } from 'zod'
import { telemetryProtocol } from '../../shared/wire/telemetry.ts'
import { gentleSwell, surfaceOf } from '../support/storedSea.ts'

const loadOrder = z.object({
  url: z.string(),
  /** Of the viewers, one each. */
  cookies: z.array(z.string()),
  seconds: z.number(),
  sampleRate: z.number(),
  positions: z.array(z.tuple([z.number(), z.number()])),
  stations: z.array(z.object({ id: z.number(), code: z.string(), key: z.string(), letters: z.array(z.string()) })),
})
export type LoadOrder = z.infer<typeof loadOrder>

export interface LoadSeen {
  /** Seconds since the first frame. */
  at: number
  sent: number
  acknowledged: number
  /** Sockets that were closed by the other side. */
  lost: number
  /** ms */
  acknowledgementP50: number
  acknowledgementP99: number
  viewerP50: number
  viewerP95: number
  /** Greatest age of any station's newest estimate in this stretch, s; null before every station had one. */
  oldestEstimate: number | null
  isLast: boolean
}

const order = loadOrder.parse(JSON.parse(readFileSync(process.argv[2] ?? '', 'utf8')))
const surface = surfaceOf(gentleSwell)
const seen = { sent: 0, acknowledged: 0, lost: 0 }
const stretch = { acknowledgements: [] as number[], viewers: [] as number[], oldest: 0 }
const whole = { acknowledgements: [] as number[], viewers: [] as number[], oldest: 0 }
const newest = new Map<number, number>()

const share = (values: number[], part: number): number =>
  values.toSorted((a, b) => a - b)[Math.min(values.length - 1, Math.floor(values.length * part))] ?? NaN

interface Station {
  id: number
  socket: WebSocket
  next: number
  sentAt: Map<number, number>
  /** When the frame that starts at this time was sent. */
  startedAt: Map<number, number>
  letters: string[]
}

/** One second of one sea for all of them, as text: the load process must not be what is measured. */
function secondOf(start: number): string {
  const values = order.positions.map(([east, north]) =>
    Array.from({ length: order.sampleRate }, (_, n) =>
      Number(surface(east, north, start + (n * 1000) / order.sampleRate).toFixed(4)),
    ),
  )
  return JSON.stringify(values)
}

async function open({ id, code, key, letters }: LoadOrder['stations'][number]): Promise<Station> {
  const socket = new WebSocket(`${order.url.replace('http', 'ws')}/telemetry`, telemetryProtocol, {
    headers: { authorization: `Bearer ${key}` },
    perMessageDeflate: false,
  })
  const station: Station = { id, socket, next: 1, sentAt: new Map(), startedAt: new Map(), letters }
  const sensors = letters.map((letter) => ({ id: letter, kind: 'surface', unit: 'm' }))
  const hello = { type: 'hello', station: code, stream: randomUUID(), software: 'load', sampleRate: order.sampleRate }
  await new Promise<void>((resolve, reject) => {
    socket.on('error', reject)
    socket.on('close', () => (seen.lost += 1))
    socket.on('open', () => socket.send(JSON.stringify({ ...hello, sensors, sentAt: new Date().toISOString() })))
    socket.on('message', (text) => {
      const message = JSON.parse(String(text))
      if (message.type === 'welcome') resolve()
      if (message.type !== 'ack') return
      const now = performance.now()
      for (const [seq, sent] of station.sentAt) {
        if (seq > message.seq) break
        note('acknowledgements', now - sent)
        seen.acknowledged += 1
        station.sentAt.delete(seq)
      }
    })
  })
  return station
}

function note(what: 'acknowledgements' | 'viewers', milliseconds: number): void {
  stretch[what].push(milliseconds)
  whole[what].push(milliseconds)
}

function sendSecond(station: Station, start: number, values: string): void {
  const seq = station.next++
  const now = performance.now()
  station.sentAt.set(seq, now)
  station.startedAt.set(start, now)
  station.startedAt.delete(start - 30_000)
  const head = { type: 'frame', seq, start: new Date(start).toISOString(), interval: 1 / order.sampleRate }
  const rest = { ...head, sensors: station.letters, sentAt: new Date().toISOString() }
  station.socket.send(`${JSON.stringify(rest).slice(0, -1)},"values":${values}}`)
  seen.sent += 1
}

/** Hears estimates of all stations and the traces of one. */
async function openViewer(station: Station, cookie: string): Promise<void> {
  const socket = new WebSocket(`${order.url.replace('http', 'ws')}/live`, {
    headers: { cookie, origin: order.url },
    perMessageDeflate: false,
  })
  await new Promise<void>((resolve, reject) => {
    socket.on('error', reject)
    socket.on('close', () => (seen.lost += 1))
    socket.on('message', (text) => {
      const message = JSON.parse(String(text))
      if (message.type === 'hello')
        socket.send(JSON.stringify({ type: 'subscribe', rooms: ['stations', `traces:${station.id}`] }))
      if (message.type === 'subscribed') resolve()
      if (message.type === 'event') hear(station, message)
    })
  })
}

function hear(station: Station, { kind, body }: { kind: string; body: never }): void {
  const { stationId, windowEndsAt, startsAt, interval, values } = z
    .object({
      stationId: z.number().optional(),
      windowEndsAt: z.string().optional(),
      startsAt: z.string().optional(),
      interval: z.number().optional(),
      values: z.array(z.array(z.unknown())).optional(),
    })
    .parse(body ?? {})
  if (kind === 'estimate' && stationId && windowEndsAt)
    newest.set(stationId, Math.max(newest.get(stationId) ?? 0, Date.parse(windowEndsAt)))
  if (kind !== 'traces' || !startsAt || !interval) return
  const until = Date.parse(startsAt) + (values?.[0]?.length ?? 0) * interval * 1000
  const sent = station.startedAt.get(Math.round(until - 1000))
  if (sent !== undefined) note('viewers', performance.now() - sent)
}

function report(at: number, isLast: boolean): void {
  const from = isLast ? whole : stretch
  const line: LoadSeen = {
    at,
    ...seen,
    acknowledgementP50: share(from.acknowledgements, 0.5),
    acknowledgementP99: share(from.acknowledgements, 0.99),
    viewerP50: share(from.viewers, 0.5),
    viewerP95: share(from.viewers, 0.95),
    oldestEstimate: newest.size < order.stations.length ? null : from.oldest,
    isLast,
  }
  process.stdout.write(`${JSON.stringify(line)}\n`)
  Object.assign(stretch, { acknowledgements: [], viewers: [], oldest: 0 })
}

const stations: Station[] = []
for (const station of order.stations) stations.push(await open(station))
for (const [n, cookie] of order.cookies.entries()) await openViewer(stations[n % stations.length]!, cookie)

/** Each station sends at its own moment of the second, as real ones do. */
const began = performance.now()
for (let second = 0; second < order.seconds; second++) {
  const start = Math.floor(Date.now() / 1000) * 1000 - 1000
  const values = secondOf(start)
  const dueFrom = began + second * 1000
  for (const [n, station] of stations.entries()) {
    const early = dueFrom + (n * 950) / stations.length - performance.now()
    if (early > 4) await pause(early)
    sendSecond(station, start, values)
  }
  const now = Date.now()
  const ages = stations.map(({ id }) => (now - (newest.get(id) ?? now)) / 1000)
  if (newest.size === stations.length) {
    stretch.oldest = Math.max(stretch.oldest, ...ages)
    whole.oldest = Math.max(whole.oldest, ...ages)
  }
  if (second % 10 === 9) report(second + 1, false)
  const early = dueFrom + 1000 - performance.now()
  if (early > 0) await pause(early)
}
await pause(3000)
report(order.seconds, true)
process.exit(0)

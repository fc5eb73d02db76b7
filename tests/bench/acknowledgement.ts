/** How long stations wait for their acknowledgement, over real sockets: in calm, and while another one floods. */
import { randomUUID } from 'node:crypto'
import { setTimeout as pause } from 'node:timers/promises'
import { systemClock } from '../../server/config/clock.ts'
import { makeStation, makeStationKey } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { startMariadb } from '../support/mariadb.ts'
import { frameOf, helloOf, openLink, serveTelemetry } from '../support/telemetry.ts'
import type { StationLink, TelemetryServer } from '../support/telemetry.ts'
import { benchParts, createBenchSchema } from './benchParts.ts'
import type { Figure } from './benchParts.ts'

const stations = 20
const positions: [number, number][] = [[-40, -18], [-8, -30], [6, -14], [30, 34], [-18, 22]] // prettier-ignore
const usualBetweenCommitsMs = 250

interface OnLine {
  made: StationMade
  link: StationLink
  sentAt: Map<number, number>
  waits: number[]
  next: number
}

async function comeOnLine(server: TelemetryServer): Promise<OnLine> {
  const made = await makeStation(systemClock, { sampleRate: 4, positions })
  const { key } = await makeStationKey(systemClock, made.station.id)
  const link = await openLink(server.url, key)
  link.send(helloOf(made, { stream: randomUUID(), sentAt: new Date() }))
  await link.next('welcome')
  const station: OnLine = { made, link, sentAt: new Map(), waits: [], next: 1 }
  link.socket.on('message', (text: Buffer) => {
    const message = JSON.parse(text.toString())
    if (message.type !== 'ack') return
    for (const [seq, sent] of station.sentAt) {
      if (seq > message.seq) continue
      station.waits.push(performance.now() - sent)
      station.sentAt.delete(seq)
    }
  })
  return station
}

/** The next second of record, counted from `from`. */
function sendNext(station: OnLine, from: number): void {
  const seq = station.next
  station.next += 1
  station.sentAt.set(seq, performance.now())
  station.link.send(frameOf(station.made, { seq, start: new Date(from + seq * 1000), sentAt: new Date() }))
}

/** Five frames a second from each of the twenty: 2,000 readings a second. */
async function run(fleet: OnLine[], seconds: number, beside: () => void = () => undefined): Promise<number[]> {
  const from = Date.now() - 3_600_000
  for (const station of fleet) station.waits = []
  for (let n = 0; n < seconds * 5; n++) {
    for (const station of fleet) sendNext(station, from)
    beside()
    await pause(200)
  }
  for (const station of fleet) await station.link.acknowledged(station.next - 1)
  return fleet.flatMap(({ waits }) => waits).sort((a, b) => a - b)
}

const share = (sorted: number[], part: number): number => sorted[Math.floor(sorted.length * part)] ?? NaN

export async function benchAcknowledgement(): Promise<Figure[]> {
  const database = await startMariadb({ durable: true })
  const parts = await benchParts(await createBenchSchema(database))
  const server = await serveTelemetry(parts, 15_000, usualBetweenCommitsMs)
  try {
    const fleet = await Promise.all(Array.from({ length: stations }, () => comeOnLine(server)))
    const calm = await run(fleet, 20)
    const wild = await comeOnLine(server)
    const floodFrom = Date.now() - 20 * 3_600_000
    const flooded = await run(fleet, 20, () => {
      for (let n = 0; n < 100; n++) sendNext(wild, floodFrom)
    })
    const { code } = await wild.link.closed
    return [
      { what: 'acknowledgement at 2,000 readings/s, median', value: share(calm, 0.5), unit: 'ms' },
      { what: 'acknowledgement at 2,000 readings/s, 99 %', value: share(calm, 0.99), unit: 'ms' },
      { what: 'the same while another station floods, median', value: share(flooded, 0.5), unit: 'ms' },
      { what: 'the same while another station floods, 99 %', value: share(flooded, 0.99), unit: 'ms' },
      { what: 'the flooding station was closed with', value: code, unit: '' },
    ]
  } finally {
    await server.stop()
    await parts.sequelize.close()
    await database.stop()
  }
}

/** Frames into the store without a socket: what a connection does between parsing and the commit. */
import { randomUUID } from 'node:crypto'
import type { Arrival, OpenStream, Outcome, ReadingStore, StationFacts } from '../../server/services/readings.ts'
import { loadStationFacts, packFrame } from '../../server/services/readings.ts'
import { placeFrame } from '../../server/sockets/telemetry/placeFrame.ts'
import type { StationMade } from './factories.ts'
import type { TestParts } from './parts.ts'
import { frameOf } from './telemetry.ts'
import type { FrameWanted } from './telemetry.ts'

export interface Feeder {
  station: StationFacts
  stream: OpenStream
  /** Commits these frames together, and answers what became of each. */
  feed(frames: FrameWanted[]): Promise<Outcome['kind'][]>
}

export async function feederOf(parts: TestParts, store: ReadingStore, made: StationMade): Promise<Feeder> {
  const station = await loadStationFacts(made.station.id, parts.clock.now())
  if (!station) throw new Error('the station is gone')
  const stream = await store.streams.open(station.id, randomUUID())
  const arrivalOf = (wanted: FrameWanted, settled: Arrival['settled']): Arrival => {
    const frame = frameOf(made, wanted)
    const arrivedAt = parts.clock.now().getTime()
    const placed = placeFrame(frame, station, arrivedAt)
    if ('code' in placed) throw new Error(placed.detail)
    const sentAt = Date.parse(frame.sentAt)
    return { kind: 'frame', station, stream, seq: wanted.seq, span: placed.span, ...packFrame(placed.span), sentAt, arrivedAt, clockOffset: 0, settled } // prettier-ignore
  }
  return {
    station,
    stream,
    async feed(frames) {
      const outcomes: Outcome['kind'][] = []
      for (const wanted of frames) store.enqueue(arrivalOf(wanted, (outcome) => outcomes.push(outcome.kind)))
      await store.flush()
      return outcomes
    },
  }
}

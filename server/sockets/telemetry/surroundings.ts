import type { Clock } from '../../config/clock.ts'
import type { Bus } from '../../services/bus.ts'
import type { ReadingStore } from '../../services/readings.ts'
import type { Pace } from './pace.ts'

/** A connection as the others see it. */
export interface StreamingStation {
  readonly stationId: number
  close(code: number, reason: string): void
}

/** What a connection works with. */
export interface Surroundings {
  clock: Clock
  bus: Bus
  store: ReadingStore
  /** Of a station, whatever connection it comes by: to connect again gives no new reserve. */
  paceOf(stationId: number): Pace
  /** A connection has been welcomed: it is the station's only one from now on. */
  welcomed(connection: StreamingStation): void
}

import type { Clock } from '../../config/clock.ts'
import type { Bus } from '../../services/bus.ts'
import type { ReadingStore } from '../../services/readings.ts'
import type { Connection } from './connection.ts'

/** What a connection works with. */
export interface Surroundings {
  clock: Clock
  bus: Bus
  store: ReadingStore
  /** A connection has been welcomed: it is the station's only one from now on. */
  welcomed(connection: Connection): void
}

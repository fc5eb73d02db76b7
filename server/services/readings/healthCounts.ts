/**
 * Counts of what came from each sensor, by hour of the instrument's time. Gathered in memory and written with a
 * commit every ten seconds, so that they cost the stream next to nothing.
 */
import type { Transaction } from 'sequelize'
import { execute } from '../../models/sql.ts'
import { database } from './database.ts'
import { createLatencies } from './latencies.ts'
import type { Latencies } from './latencies.ts'

const hourMs = 3_600_000

export interface HealthNote {
  stationId: number
  sensorId: number
  /** ms since 1970 UTC. */
  at: number
  /** Hz. */
  sampleRate: number
  received?: number
  late?: number
  repeated?: number
  conflicting?: number
  clockOffset: number | null
  /** From the end of the samples to their arrival, s. */
  latencySeconds: number
}

interface HourCounts {
  stationId: number
  sensorId: number
  hour: number
  expected: number
  received: number
  late: number
  repeated: number
  conflicting: number
  clockOffset: number | null
}

export interface HealthCounts {
  note(note: HealthNote): void
  /** Adds what was counted to the table; call `written` after the commit, so that a failed one loses nothing. */
  write(transaction: Transaction): Promise<{ written(): void }>
}

export function createHealthCounts(): HealthCounts {
  let counts = new Map<string, HourCounts>()
  const latencies = new Map<string, Latencies>()

  function countsOf({ stationId, sensorId, at, sampleRate }: HealthNote): HourCounts {
    const hour = Math.floor(at / hourMs) * hourMs
    const key = `${stationId}/${sensorId}/${hour}`
    const known = counts.get(key)
    if (known) return known
    const expected = Math.round(sampleRate * 3600)
    const fresh = { stationId, sensorId, hour, expected, received: 0, late: 0, repeated: 0, conflicting: 0, clockOffset: null } // prettier-ignore
    counts.set(key, fresh)
    return fresh
  }

  function latenciesOf(stationId: number, hour: number): Latencies {
    const key = `${stationId}/${hour}`
    const known = latencies.get(key) ?? createLatencies()
    latencies.set(key, known)
    if (latencies.size > 2000) for (const oldest of latencies.keys()) return (latencies.delete(oldest), known)
    return known
  }

  return {
    note(note) {
      const hour = countsOf(note)
      hour.received += note.received ?? 0
      hour.late += note.late ?? 0
      hour.repeated += note.repeated ?? 0
      hour.conflicting += note.conflicting ?? 0
      hour.clockOffset = note.clockOffset
      latenciesOf(note.stationId, hour.hour).add(note.latencySeconds)
    },
    async write(transaction) {
      const writing = counts
      if (writing.size > 0) {
        await execute(
          database(),
          `INSERT INTO stationHealthHours (stationId, sensorId, hour, expected, received, late, repeated, conflicting,
             clockOffset, latencyP95) VALUES :rows
           ON DUPLICATE KEY UPDATE expected = VALUES(expected), received = received + VALUES(received),
             late = late + VALUES(late), repeated = repeated + VALUES(repeated),
             conflicting = conflicting + VALUES(conflicting), clockOffset = VALUES(clockOffset),
             latencyP95 = VALUES(latencyP95)`,
          {
            rows: [...writing.values()].map((hour) => [
              hour.stationId,
              hour.sensorId,
              new Date(hour.hour),
              hour.expected,
              hour.received,
              hour.late,
              hour.repeated,
              hour.conflicting,
              hour.clockOffset,
              latenciesOf(hour.stationId, hour.hour).percentile95(),
            ]),
          },
          transaction,
        )
      }
      return { written: () => void (counts = new Map()) }
    },
  }
}

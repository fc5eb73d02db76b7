/** The record section as a table: every second on the page, every sample in the file. */
import { clockUtcSeconds } from '../../../../shared/times.ts'
import { decimals } from '../../../../shared/units.ts'
import type { RecordedTraces } from '../../drawings/geometry/recordLayout.ts'
import type { FiguresTable } from './figuresTable.ts'

export function recordFigures(traces: RecordedTraces): FiguresTable {
  const length = Math.max(0, ...traces.values.map((values) => values.length))
  const samples = Array.from({ length }, (_, n) => ({
    at: traces.startsAtMs + n * traces.interval * 1000,
    values: traces.values.map((values) => values[n] ?? null),
  }))
  const wholeSeconds = samples.filter(({ at }) => at % 1000 < traces.interval * 1000 * 0.99)
  return {
    of: 'record section',
    note: `readings as sent (m or dbar), each second; the copy has all ${length} samples`,
    columns: [
      { heading: 'UTC', fileHeading: 'time_utc' },
      ...traces.sensors.map((name) => ({ heading: name, isNumber: true })),
    ],
    rows: wholeSeconds
      .reverse()
      .map(({ at, values }) => [
        clockUtcSeconds(at),
        ...values.map((value) => (value === null ? 'missing' : decimals(value, 3))),
      ]),
    fileRows: [...samples].reverse().map(({ at, values }) => [new Date(at).toISOString(), ...values]),
  }
}

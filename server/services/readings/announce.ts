/** What the process hears after a commit: how far each station's readings reach, their traces, their counts. */
import { countPresent, fromStored, joinSpans } from '../../../shared/readings/span.ts'
import type { SampleSpan } from '../../../shared/readings/span.ts'
import type { TracesChunk } from '../../../shared/schemas/station.ts'
import type { Bus } from '../bus.ts'
import type { StoredSpan } from './commit.ts'
import { groupBy } from './groupBy.ts'
import type { HealthCounts } from './healthCounts.ts'
import { noteDurable, noteExpected } from './links.ts'
import { timesOf } from './restore.ts'

/** Older readings come from a buffer: they are no live trace. */
const liveWithinMs = 60_000

interface Hearers {
  bus: Bus
  health: HealthCounts
  now: number
}

export function announce(judged: readonly StoredSpan[], { bus, health, now }: Hearers): void {
  for (const [stationId, ofStation] of groupBy(judged, ({ frame }) => frame.station.id)) {
    for (const one of ofStation) countHealth(one, health)
    for (const { outcome, from, to } of ofStation) if (outcome.kind === 'repeated') noteDurable(stationId, from, to, 0)
    const stored = ofStation.flatMap(({ span, ...rest }) => (span ? [{ ...rest, span }] : []))
    const [newest] = stored.slice(-1)
    if (!newest) continue
    const { sampleRate, deployment } = newest.frame.station
    noteExpected(stationId, sampleRate * (deployment?.sensors.length ?? 0))
    for (const { from, to, span } of stored) noteDurable(stationId, from, to, countPresent(span))
    const live = stored.filter(({ to, span }) => to > now - liveWithinMs && span.sampleRate === sampleRate)
    if (live.length > 0) bus.publish('traces.arrived', tracesOf(stationId, joinSpans(live.map(({ span }) => span))))
    bus.publish('readings.stored', {
      stationId,
      from: Math.min(...stored.map(({ from }) => from)),
      to: Math.max(...stored.map(({ to }) => to)),
      late: stored.some(({ late }) => late),
    })
  }
}

export function tracesOf(stationId: number, span: SampleSpan): TracesChunk {
  return {
    stationId,
    startsAt: new Date(timesOf(span).from).toISOString(),
    interval: 1 / span.sampleRate,
    sensors: span.letters,
    values: span.series.map((series) =>
      Array.from(series, (stored) => (Number.isNaN(stored) ? null : fromStored(stored))),
    ),
  }
}

function countHealth({ frame, outcome, span, from, to, late }: StoredSpan, health: HealthCounts): void {
  frame.station.deployment?.sensors.forEach(({ id, letter }, index) => {
    const arrived = present(frame.span, index)
    const stored = span ? present(span, span.letters.indexOf(letter)) : 0
    health.note({
      stationId: frame.station.id,
      sensorId: id,
      at: from,
      sampleRate: frame.station.sampleRate,
      received: stored,
      late: late ? stored : 0,
      repeated: outcome.kind === 'conflict' ? 0 : arrived - stored,
      conflicting: outcome.kind === 'conflict' ? arrived : 0,
      clockOffset: frame.clockOffset,
      latencySeconds: (frame.arrivedAt - to) / 1000,
    })
  })
}

function present({ series }: SampleSpan, index: number): number {
  let count = 0
  for (const value of series[index] ?? []) if (!Number.isNaN(value)) count++
  return count
}

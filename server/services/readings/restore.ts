/** Rebuilds what memory knows of the stations' links from the stored readings, once at a start. */
import { Op } from 'sequelize'
import { timeOfSlot } from '../../../shared/readings/slots.ts'
import { countPresent, lengthOf } from '../../../shared/readings/span.ts'
import type { SampleSpan } from '../../../shared/readings/span.ts'
import type { Clock } from '../../config/clock.ts'
import { Frame, ReadingBlock, Station } from '../../models/index.ts'
import { beginLinks, noteDurable, noteExpected } from './links.ts'
import { unpackReadings } from './payload.ts'
import { loadStationFacts } from './station.ts'
import { loadParts } from './window.ts'

const recordMs = 20 * 60_000

export async function restoreLinks(clock: Clock): Promise<void> {
  beginLinks(clock)
  const stations = await Station.findAll({ where: { state: { [Op.ne]: 'retired' } } })
  for (const { id } of stations) await restoreLink(id, clock.now())
}

async function restoreLink(stationId: number, now: Date): Promise<void> {
  const facts = await loadStationFacts(stationId, now)
  if (!facts) return
  noteExpected(stationId, facts.sampleRate * (facts.deployment?.sensors.length ?? 0))
  for (const newest of await newestSpans(stationId)) noteSpan(stationId, newest, 0)
  const recent = await loadParts(stationId, now.getTime() - recordMs, now.getTime())
  for (const { span } of recent) noteSpan(stationId, span, countPresent(span))
}

/** Times that a span covers, ms: from its first sample to the end of its last. */
export const timesOf = (span: SampleSpan): { from: number; to: number } => ({
  from: timeOfSlot(span.firstSlot, span.sampleRate),
  to: timeOfSlot(span.firstSlot + lengthOf(span), span.sampleRate),
})

function noteSpan(stationId: number, span: SampleSpan, present: number): void {
  const { from, to } = timesOf(span)
  noteDurable(stationId, from, to, present)
}

async function newestSpans(stationId: number): Promise<SampleSpan[]> {
  const where = { stationId }
  const order: [string, string][] = [['startsAt', 'DESC']]
  const newest = [await Frame.findOne({ where, order }), await ReadingBlock.findOne({ where, order })]
  return newest.flatMap((row) => (row ? [unpackReadings(row.payload)] : []))
}

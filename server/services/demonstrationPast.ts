/**
 * The demonstration's past: half a day of readings through the import that every file takes, the newest first, then a
 * year of estimates that were invented and say so. The ordinary job computes what the readings give.
 */
import { setTimeout as pause } from 'node:timers/promises'
import { dateUtc } from '../../shared/times.ts'
import type { Parts } from '../config/parts.ts'
import { LongJob } from '../models/index.ts'
import { insertInvented, rowsAtOnce } from './demonstrationPast/insertInvented.ts'
import { readPast, readStretches, rowsOf, seaStateBatches } from './demonstrationPast/manifest.ts'
import type { Past } from './demonstrationPast/manifest.ts'
import { forgetMarks, markTakenIn, takenInFrom } from './demonstrationPast/marks.ts'
import { readTimelines } from './estimates.ts'
import type { StationTimeline } from './estimates.ts'
import { importReadings } from './imports.ts'
import { addJob, failJob, finishJob, reportProgress, takeJob } from './longJobs.ts'
import { dayMs, dayOf, firstUnpackedDay, notePacked, rebuildSeriesDay } from './series.ts'

export { readPast }
export type { Past }

const kind = 'demonstrationPast'
const title = 'Taking in the demonstration’s past'
const stretchMs = 2 * 3_600_000
/** What of the whole the readings are, in the progress that is shown. */
const readingsShare = 0.4
/** The live path gets its turn between days that are packed. */
const pauseMilliseconds = 5

/** Done, or called off by a person. */
export async function isTakenIn({ hash }: Past): Promise<boolean> {
  const jobs = await LongJob.findAll({ where: { kind, status: ['done', 'cancelled'] } })
  return jobs.some(({ parameters }) => parameters?.hash === hash)
}

/** The job for this past, begun or taken up again. There is one server a database, so one that runs was left by an earlier start. */
export async function takePastJob(parts: Parts, { hash }: Past): Promise<number | null> {
  await LongJob.update({ status: 'queued', leaseUntil: null }, { where: { kind, status: 'running' } })
  const waiting = await LongJob.findAll({ where: { kind, status: 'queued' } })
  if (!waiting.some(({ parameters }) => parameters?.hash === hash)) {
    for (const { id } of waiting) await failJob(parts, id, 'Another past has taken the place of this one')
    if (!(await wasTried(hash))) await forgetMarks(parts)
    await addJob(parts, { kind, title, parameters: { hash } })
  }
  return (await takeJob(parts, kind))?.id ?? null
}

/** What a failed attempt has taken in stays. */
async function wasTried(hash: string): Promise<boolean> {
  const [last] = await LongJob.findAll({ where: { kind }, order: [['id', 'DESC']], limit: 1 })
  return last?.parameters?.hash === hash
}

/** Resolves when all is in, when it was called off or stopped. Errors: none; the job fails and says why. */
export async function takeInPast(parts: Parts, past: Past, jobId: number, isStopped: () => boolean): Promise<void> {
  const halted = { value: false }
  const isHalted = () => halted.value || isStopped()
  const report = async (progress: number, detail: string) => {
    if (!(await reportProgress(parts, jobId, progress, detail))) halted.value = true
  }
  try {
    const timelines = await readTimelines(parts.sequelize)
    const stations = past.manifest.stations.flatMap((station) => {
      const timeline = timelines.find(({ code }) => code === station.code)
      return timeline ? [{ ...station, timeline }] : []
    })
    await takeInReadings(parts, past, stations, report, isHalted)
    await invent(parts, past, stations, report, isHalted)
    if (!isHalted()) await finishJob(parts, jobId, 'The past is in')
  } catch (error) {
    parts.logger.error({ error }, 'the past of the demonstration could not be taken in')
    await failJob(
      parts,
      jobId,
      `${error instanceof Error ? error.message : String(error)}; it is tried again at the next start`,
    )
  }
}

type PastStation = Past['manifest']['stations'][number] & { timeline: StationTimeline }
type Report = (progress: number, detail: string) => Promise<void>

/** A stretch of every station, then the stretch before it. */
async function takeInReadings(
  parts: Parts,
  past: Past,
  stations: PastStation[],
  report: Report,
  isHalted: () => boolean,
) {
  const recorded = await Promise.all(
    stations.map(async ({ timeline, readingsFile }) => {
      const [from, readings] = await Promise.all([
        takenInFrom(parts, 'readings', timeline.id),
        readStretches(past, readingsFile, stretchMs),
      ])
      return { timeline, readingsFile, letters: readings.letters, all: readings.stretches, from }
    }),
  )
  const work = recorded
    .flatMap(({ all, ...one }) => all.map((stretch) => ({ ...one, stretch })))
    .sort((a, b) => b.stretch.from - a.stretch.from)
  for (const [index, { timeline, letters, readingsFile, stretch, from }] of work.entries()) {
    if (isHalted()) return
    if (stretch.from >= from) continue
    const { faults } = await importReadings(parts, {
      stationId: timeline.id,
      source: 'demonstration',
      rows: rowsOf(stretch),
      letters,
      fileName: readingsFile,
      personId: null,
    })
    const [fault] = faults
    if (fault) throw new Error(`${readingsFile}, row ${fault.row ?? '?'}: ${fault.reason}`)
    await markTakenIn(parts, 'readings', timeline.id, stretch.from)
    await report((readingsShare * (index + 1)) / work.length, `readings of ${timeline.code}`)
  }
}

/** The last month of every station first, then the rest of the year; each with its days of the series. */
async function invent(parts: Parts, past: Past, stations: PastStation[], report: Report, isHalted: () => boolean) {
  for (const { timeline, readingsFrom } of stations)
    await claimDays(parts, timeline.id, dayOf(Date.parse(readingsFrom)))
  const work = stations
    .flatMap(({ seaStates, ...station }) => seaStates.map((file, order) => ({ ...station, ...file, order })))
    .sort((a, b) => a.order - b.order)
  const madeAt = Date.parse(past.manifest.madeAt)
  for (const [index, { timeline, file, readingsFrom }] of work.entries()) {
    if (isHalted()) return
    const before = await takenInFrom(parts, 'seaStates', timeline.id)
    const batches = seaStateBatches(past, file, rowsAtOnce)
    const span = await insertInvented(parts, { timeline, batches, before, madeAt, hash: past.hash }, isHalted)
    if (span === 'halted') return
    if (!span) continue
    await packDays(parts, timeline.id, span.oldest, Math.min(span.newest, Date.parse(readingsFrom)))
    await markTakenIn(parts, 'seaStates', timeline.id, span.oldest)
    const progress = readingsShare + ((1 - readingsShare) * (index + 1)) / work.length
    await report(progress, `estimates of ${timeline.code} back to ${dateUtc(span.oldest)}`)
  }
}

/** Days before the readings are packed here; the job that packs closed days begins with the day of the readings. */
async function claimDays(parts: Parts, stationId: number, firstOther: string): Promise<void> {
  const unpacked = await firstUnpackedDay(parts, stationId)
  if (unpacked === null || unpacked < firstOther) await notePacked(parts, stationId, firstOther)
}

async function packDays(parts: Parts, stationId: number, oldest: number, newest: number): Promise<void> {
  for (let time = oldest; dayOf(time) <= dayOf(newest); time += dayMs) {
    await rebuildSeriesDay(parts, stationId, dayOf(time))
    await pause(pauseMilliseconds)
  }
}

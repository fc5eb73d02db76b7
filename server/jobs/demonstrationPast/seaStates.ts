/** The past before the readings, as invented estimates: the last month of every station first, then the rest of the year. */
import { setTimeout as pause } from 'node:timers/promises'
import type { Parts } from '../../config/parts.ts'
import { dateUtc } from '../../../shared/times.ts'
import {
  insertInvented,
  markTakenIn,
  rowsAtOnce,
  seaStateBatches,
  takenInFrom,
} from '../../services/demonstrationPast.ts'
import type { VersionsThen } from '../../services/demonstrationPast.ts'
import { inForce } from '../../services/estimates.ts'
import type { StationTimeline } from '../../services/estimates.ts'
import { dayMs, dayOf, firstUnpackedDay, notePacked, rebuildSeriesDay } from '../../services/series.ts'
import type { Undertaking } from './undertaking.ts'

/** The live path gets its turn between days that are packed. */
const pauseMilliseconds = 5

/** Each file with its days of the series. */
export async function takeInSeaStates({ parts, past, stations, report, isHalted }: Undertaking): Promise<void> {
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
    const station = { id: timeline.id, code: timeline.code, versionsAt: versionsOf(timeline) }
    const span = await insertInvented(parts, { station, batches, before, madeAt, hash: past.hash }, isHalted)
    if (span === 'halted') return
    if (!span) continue
    await packDays(parts, timeline.id, span.oldest, Math.min(span.newest, Date.parse(readingsFrom)))
    await markTakenIn(parts, 'seaStates', timeline.id, span.oldest)
    await report((index + 1) / work.length, `estimates of ${timeline.code} back to ${dateUtc(span.oldest)}`)
  }
}

const versionsOf =
  ({ settings, deployments }: StationTimeline) =>
  (time: number): VersionsThen | null => {
    const [setting, deployment] = [inForce(settings, time), inForce(deployments, time)]
    if (!setting || !deployment) return null
    return {
      settingsId: setting.id,
      windowSeconds: setting.content.windowSeconds,
      deploymentId: deployment.id,
      sensorsDeployed: deployment.sensors.length,
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

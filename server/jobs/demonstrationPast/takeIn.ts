/**
 * Half a day of readings through the import that every file takes, the newest first, then a year of estimates that were
 * invented and say so. The ordinary job computes what the readings give.
 */
import type { Parts } from '../../config/parts.ts'
import type { Past } from '../../services/demonstrationPast.ts'
import { readTimelines } from '../../services/estimates.ts'
import { failJob, finishJob, reportProgress } from '../../services/longJobs.ts'
import { takeInReadings } from './readings.ts'
import { takeInSeaStates } from './seaStates.ts'
import type { PastStation } from './undertaking.ts'

/** What of the whole the readings are, in the progress that is shown. */
const readingsShare = 0.4

/** Resolves when all is in, when it was called off or stopped. Errors: none; the job fails and says why. */
export async function takeInPast(parts: Parts, past: Past, jobId: number, isStopped: () => boolean): Promise<void> {
  let isCalledOff = false
  const isHalted = () => isCalledOff || isStopped()
  const reportBetween = (from: number, to: number) => async (progress: number, detail: string) => {
    const isWanted = await reportProgress(parts, jobId, from + (to - from) * progress, detail)
    if (!isWanted) isCalledOff = true
  }
  try {
    const stations = await stationsOf(parts, past)
    const undertaking = { parts, past, stations, isHalted }
    await takeInReadings({ ...undertaking, report: reportBetween(0, readingsShare) })
    await takeInSeaStates({ ...undertaking, report: reportBetween(readingsShare, 1) })
    if (!isHalted()) await finishJob(parts, jobId, 'The past is in')
  } catch (error) {
    parts.logger.error({ error }, 'the past of the demonstration could not be taken in')
    const reason = error instanceof Error ? error.message : String(error)
    await failJob(parts, jobId, `${reason}; it is tried again at the next start`)
  }
}

async function stationsOf(parts: Parts, past: Past): Promise<PastStation[]> {
  const timelines = await readTimelines(parts.sequelize)
  return past.manifest.stations.flatMap((station) => {
    const timeline = timelines.find(({ code }) => code === station.code)
    return timeline ? [{ ...station, timeline }] : []
  })
}

/** A worker thread: takes a window, answers its estimate. One at a time, in the order they come. */
import { setPriority } from 'node:os'
import { parentPort } from 'node:worker_threads'
import type { EstimateResult } from '../../shared/schemas/estimate.ts'
import { estimate } from '../../shared/waves/estimate.ts'
import { defaultQualityLimits } from '../../shared/waves/qualityLimits.ts'
import { judgeAgainstPast } from '../../shared/waves/recordTests.ts'
import { judgeStationClock } from '../../shared/waves/stationClock.ts'
import { trackSystems } from '../../shared/waves/trackSystems.ts'
import type { EstimateAnswer, EstimateFigures, EstimateTask, WorkerReply, WorkerRequest } from './estimateTask.ts'
import { packDetail } from './packDetail.ts'
import { resultDigest } from './resultDigest.ts'

function answer({ window, windowEndsAt, clockOffset, known, past }: EstimateTask): EstimateAnswer {
  const bare = estimate(window)
  const limits = window.settings.quality ?? defaultQualityLimits
  const judged = judgeAgainstPast(judgeStationClock(bare, clockOffset), past, windowEndsAt, limits)
  const { systems, tracks, nextKey } = trackSystems(known, judged.systems, windowEndsAt)
  const result = { ...judged, systems }
  return {
    figures: figuresOf(result),
    known: { tracks, nextKey },
    digest: resultDigest(bare),
    detail: packDetail(result),
  }
}

function figuresOf(result: EstimateResult): EstimateFigures {
  const { spectrum: _s, directionalSpectrum: _d, waveByWave: _w, opposedTrains: _o, ...rest } = result
  const { tests: _t, traceSpeeds: _p, subArrays: _a, ...figures } = rest
  return figures
}

/** Linux keeps a priority for each thread: readings and pages go before estimates. Elsewhere it is the process's. */
if (process.platform === 'linux') setPriority(0, 2)

parentPort?.on('message', ({ id, task }: WorkerRequest) => {
  let reply: WorkerReply
  try {
    reply = { id, answer: answer(task) }
  } catch (error) {
    reply = { id, fault: error instanceof Error ? (error.stack ?? error.message) : String(error) }
  }
  parentPort?.postMessage(reply)
})

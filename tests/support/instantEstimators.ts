/** Estimators without threads: what they answer is made of the samples they were given, at once. */
import { createHash } from 'node:crypto'
import { deflateRawSync } from 'node:zlib'
import type { EstimateResult } from '../../shared/schemas/estimate.ts'
import type { EstimateAnswer, EstimateTask } from '../../server/workers/estimateTask.ts'
import type { Estimators } from '../../server/workers/estimators.ts'

export interface InstantEstimators extends Estimators {
  /** Window ends in the order in which they were asked for. */
  asked: number[]
  /** Called before each answer: may throw, or wait. */
  before: (task: EstimateTask) => void | Promise<void>
}

/** Share of samples that are there and their spread, which is all that these tests look at. */
export function instantEstimators(): InstantEstimators {
  const estimators: InstantEstimators = {
    threads: 1,
    asked: [],
    before: () => undefined,
    async run(task) {
      estimators.asked.push(task.windowEndsAt)
      await estimators.before(task)
      return answerTo(task)
    },
    stop: async () => undefined,
  }
  return estimators
}

function answerTo({ window, known, windowEndsAt }: EstimateTask): EstimateAnswer {
  const hash = createHash('sha256').update(String(windowEndsAt))
  let all = 0
  let present = 0
  let squares = 0
  for (const series of window.series) {
    hash.update(Buffer.from(series.buffer, series.byteOffset, series.byteLength))
    all += series.length
    for (const value of series) {
      if (Number.isNaN(value)) continue
      present += 1
      squares += value ** 2
    }
  }
  const result: EstimateResult = {
    resolved: true,
    reason: null,
    qualityFlag: 1,
    significantWaveHeight: 4 * Math.sqrt(squares / present),
    significantWaveHeightSd: null,
    peakPeriod: 10,
    meanPeriod: null,
    energyPeriod: null,
    energyFlux: null,
    surgeHeight: window.surge ? 0.01 : null,
    surgeSpectrum: null,
    waterDepth: window.waterDepth,
    waterDepthSource: window.waterDepthSource,
    completeness: present / all,
    systems: [],
    sensors: window.sensors.map(({ id }) => ({
      id,
      used: true,
      qualityFlag: 1,
      findings: [],
      completeness: 1,
      significantWaveHeight: null,
      clockOffset: null,
      clockOffsetSd: null,
      positionOffset: null,
      positionOffsetSd: null,
      waterDepth: null,
    })),
    traceSpeeds: [],
    tests: [],
    subArrays: [],
    lagResidualRms: null,
    runnerUp: null,
    spectrum: null,
    directionalSpectrum: null,
    waveByWave: null,
    opposedTrains: null,
  }
  return {
    figures: result,
    known: { tracks: known.tracks, nextKey: known.nextKey },
    digest: hash.digest('hex'),
    detail: deflateRawSync(JSON.stringify(result)),
  }
}

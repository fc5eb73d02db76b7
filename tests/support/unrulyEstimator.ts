/** A worker thread that misbehaves on request: the sample rate of the window says how. */
import { parentPort } from 'node:worker_threads'
import type { EstimateAnswer, WorkerRequest } from '../../server/workers/estimateTask.ts'

export const hangs = 1001
export const dies = 1002
export const throws = 1003

const answer: EstimateAnswer = {
  figures: {
    resolved: false,
    reason: 'no-resolvable-wave',
    qualityFlag: 1,
    significantWaveHeight: 0.1,
    significantWaveHeightSd: null,
    peakPeriod: null,
    meanPeriod: null,
    energyPeriod: null,
    energyFlux: null,
    surgeHeight: null,
    surgeSpectrum: null,
    waterDepth: 10,
    waterDepthSource: 'nominal',
    completeness: 1,
    systems: [],
    sensors: [],
    lagResidualRms: null,
    runnerUp: null,
  },
  known: { tracks: [], nextKey: 1 },
  digest: 'd'.repeat(64),
  detail: new Uint8Array(),
}

parentPort?.on('message', ({ id, task }: WorkerRequest) => {
  if (task.window.sampleRate === hangs) for (;;);
  if (task.window.sampleRate === dies) process.exit(7)
  if (task.window.sampleRate === throws) return parentPort?.postMessage({ id, fault: 'matrix is singular' })
  parentPort?.postMessage({ id, answer })
})

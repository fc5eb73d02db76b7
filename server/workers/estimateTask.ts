/** What goes to a worker thread for one window, and what comes back. Both are copied between threads. */
import type { EstimateResult } from '../../shared/schemas/estimate.ts'
import type { PastFigures } from '../../shared/waves/recordTests.ts'
import type { Track } from '../../shared/waves/trackSystems.ts'
import type { ArrayWindow } from '../../shared/waves/window.ts'

export interface EstimateTask {
  window: ArrayWindow
  /** Milliseconds since 1970 UTC. */
  windowEndsAt: number
  /** Station's clock less the server's, s; null when it does not matter or is not known. */
  clockOffset: number | null
  /** Wave systems of the neighbouring windows, so that the same train keeps its key. */
  known: { tracks: Track[]; nextKey: number }
  /** Estimates of the last day, to hold this one against; empty where it is to be held against none. */
  past: PastFigures[]
}

/** The result without its bulky parts, which travel packed. */
export interface EstimateAnswer {
  figures: EstimateFigures
  known: { tracks: Track[]; nextKey: number }
  /** SHA-256 of the estimator's answer, see `resultDigest`. */
  digest: string
  /** The whole result, deflated JSON. */
  detail: Uint8Array
}

export type EstimateFigures = Omit<
  EstimateResult,
  'spectrum' | 'directionalSpectrum' | 'tests' | 'traceSpeeds' | 'subArrays' | 'waveByWave' | 'opposedTrains'
>

export interface WorkerRequest {
  id: number
  task: EstimateTask
}

export type WorkerReply = { id: number; answer: EstimateAnswer } | { id: number; fault: string }

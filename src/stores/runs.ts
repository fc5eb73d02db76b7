/** Recomputations and confirmed clock offsets of a station; a run's progress comes with the long jobs. */
import { defineStore } from 'pinia'
import { shallowReactive } from 'vue'
import type { ConfirmedOffset, OffsetConfirmation } from '../../shared/schemas/clockOffset.ts'
import type { QualityTest } from '../../shared/schemas/estimate.ts'
import type { RunChoices, RunComparison, RunOrder, RunView } from '../../shared/schemas/run.ts'
import * as api from '../api/runs.ts'
import { useJobs } from './jobs.ts'

export const useRuns = defineStore('runs', () => {
  const jobs = useJobs()
  const runsHeld = shallowReactive(new Map<number, RunView[]>())
  const comparisons = shallowReactive(new Map<number, RunComparison>())
  const driftsHeld = shallowReactive(new Map<number, QualityTest[]>())
  const offsetsHeld = shallowReactive(new Map<number, ConfirmedOffset[]>())

  /** Newest first; state and progress as the newest news of the job has them. */
  const runs = (stationId: number): RunView[] =>
    (runsHeld.get(stationId) ?? []).map((run) => {
      const job = jobs.all.find(({ id }) => id === run.jobId)
      return job ? { ...run, status: job.status, progress: job.progress, detail: job.detail } : run
    })
  const comparison = (runId: number): RunComparison | null => comparisons.get(runId) ?? null
  const offsets = (stationId: number): ConfirmedOffset[] => offsetsHeld.get(stationId) ?? []

  /** Drift of each sensor's level against the others over a week. */
  const drifts = (stationId: number): QualityTest[] => driftsHeld.get(stationId) ?? []

  async function fetchRuns(stationId: number): Promise<void> {
    runsHeld.set(stationId, await api.readRuns(stationId))
  }
  async function fetchComparison(stationId: number, runId: number): Promise<void> {
    comparisons.set(runId, await api.readComparison(stationId, runId))
  }
  async function fetchOffsets(stationId: number): Promise<void> {
    offsetsHeld.set(stationId, await api.readClockOffsets(stationId))
  }
  async function fetchDrifts(stationId: number): Promise<void> {
    driftsHeld.set(stationId, await api.readLevelDrift(stationId))
  }
  const fetchChoices = (stationId: number): Promise<RunChoices> => api.readRunChoices(stationId)

  async function order(stationId: number, wanted: RunOrder): Promise<void> {
    const run = await api.orderRun(stationId, wanted)
    runsHeld.set(stationId, [run, ...(runsHeld.get(stationId) ?? [])])
  }
  async function cancel(run: RunView): Promise<void> {
    if (run.jobId !== null) jobs.apply(await api.cancelJob(run.jobId))
  }
  async function confirmOffset(stationId: number, confirmation: OffsetConfirmation): Promise<void> {
    const confirmed = await api.confirmClockOffset(stationId, confirmation)
    const others = offsets(stationId).filter(({ letter }) => letter !== confirmed.letter)
    offsetsHeld.set(
      stationId,
      [...others, confirmed].sort((a, b) => a.letter.localeCompare(b.letter)),
    )
  }

  return {
    runs,
    comparison,
    offsets,
    drifts,
    fetchDrifts,
    fetchRuns,
    fetchComparison,
    fetchOffsets,
    fetchChoices,
    order,
    cancel,
    confirmOffset,
  }
})

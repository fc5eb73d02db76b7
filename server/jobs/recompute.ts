/**
 * Works off recompute runs, one at a time and behind everything live: window after window from stored readings into estimates of
 * the run's own number. A stop in the middle loses nothing: the next start goes on after the newest window of the run.
 */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { softwareVersion } from '../config/softwareVersion.ts'
import * as estimates from '../services/estimates.ts'
import type { DeploymentVersion, SettingsVersion, StationTimeline } from '../services/estimates.ts'
import { failJob, finishJob, reportProgress, takeJob } from '../services/longJobs.ts'
import { readWindow } from '../services/readings.ts'
import { endRun, lastWindowOf, readRunWork, saveRunEstimate } from '../services/runs.ts'
import type { RunWork } from '../services/runs.ts'
import type { EstimateTask } from '../workers/estimateTask.ts'
import { EstimationFailed, startEstimators } from '../workers/estimators.ts'
import type { Estimators } from '../workers/estimators.ts'
import { noSelfTest, selfTest } from './selfTest.ts'
import type { SelfTest } from './selfTest.ts'

const deadlineMs = 60_000
/** People need no more. */
const reportEveryMs = 1_000

export interface RecomputeOptions {
  /** Others than a worker thread of its own. */
  estimators?: () => Estimators
  /** Without node-cron: only `wake` and the news of an order wake it. */
  isUnscheduled?: boolean
  /** Another than the usual self-test. */
  selfTest?: SelfTest
}

export interface Recompute extends RunningPart {
  /** Resolves when no run waits any more. */
  wake(): Promise<void>
}

export function startRecompute(parts: Parts, options: RecomputeOptions = {}): Recompute {
  const hire = options.estimators ?? (() => startEstimators({ threads: 1, deadlineMs }))
  const test = options.selfTest ?? (options.estimators ? noSelfTest : selfTest)
  let isStopped = false
  let running: Promise<void> | null = null

  async function drain(): Promise<void> {
    while (!isStopped) {
      const job = await takeJob(parts, 'recompute')
      if (!job) return
      await workOff(job.id, Number(job.parameters.runId))
    }
  }

  async function workOff(jobId: number, runId: number): Promise<void> {
    const run = await readRunWork(runId)
    if (!run) return failJob(parts, jobId, `There is no run ${runId}.`)
    const faults = await test()
    if (faults.length > 0) {
      await endRun(runId, 'failed')
      return failJob(parts, jobId, 'The self-test of the estimator failed: nothing is computed by this program.')
    }
    const estimators = hire()
    try {
      await endRun(runId, 'running')
      const outcome = await compute(run, jobId, estimators)
      if (outcome !== 'stopped') await endRun(runId, outcome)
    } catch (error) {
      if (isStopped) return
      parts.logger.error({ error, runId }, 'a recomputation failed')
      await endRun(runId, 'failed')
      await failJob(
        parts,
        jobId,
        `It failed: ${error instanceof Error ? error.message : String(error)}. What it has done stays.`,
      )
    } finally {
      await estimators.stop()
    }
  }

  async function compute(
    run: RunWork,
    jobId: number,
    estimators: Estimators,
  ): Promise<'done' | 'cancelled' | 'stopped'> {
    const timeline = (await estimates.readTimelines(parts.sequelize)).find(({ id }) => id === run.stationId)
    if (!timeline) throw new Error('the station is out of service')
    const deployment =
      run.deploymentId === null
        ? null
        : await estimates.readDeploymentVersion(parts.sequelize, run.stationId, run.deploymentId)
    const ends = windowsOf(run)
    const last = await lastWindowOf(parts, run)
    let known: EstimateTask['known'] = { tracks: [], nextKey: 1 }
    let reportedAt = -Infinity
    let made = 0
    for (const [index, windowEndsAt] of ends.entries()) {
      if (isStopped) return 'stopped'
      if (parts.clock.monotonic() - reportedAt >= reportEveryMs) {
        reportedAt = parts.clock.monotonic()
        if (!(await reportProgress(parts, jobId, index / ends.length, `${index} of ${ends.length} windows`)))
          return 'cancelled'
      }
      if (last !== null && windowEndsAt <= last) continue
      const next = await computeWindow(run, timeline, deployment, windowEndsAt, known, estimators)
      if (next) made += 1
      known = next ?? known
    }
    if (!(await reportProgress(parts, jobId, 1, null))) return 'cancelled'
    await finishJob(parts, jobId, `${made} windows computed, ${ends.length - made} without readings or made before`)
    return 'done'
  }

  /** Null where there is nothing to compute with. */
  async function computeWindow(
    run: RunWork,
    timeline: StationTimeline,
    corrected: DeploymentVersion | null,
    windowEndsAt: number,
    known: EstimateTask['known'],
    estimators: Estimators,
  ): Promise<EstimateTask['known'] | null> {
    const deployment = corrected ?? estimates.inForce(timeline.deployments, windowEndsAt)
    const settings = settingsOf(run, timeline, windowEndsAt)
    if (!deployment || !settings) return null
    const seen = await estimates.commitSeenBy(parts, run.stationId, windowEndsAt)
    const readings = await readWindow(run.stationId, estimates.readingsFrom(windowEndsAt, settings), windowEndsAt, {
      letters: deployment.sensors.map(({ letter }) => letter),
      ...(seen !== null && { upToCommitId: seen }),
    })
    if (readings.sampleCount === 0) return null
    const question = { windowEndsAt, deployment, settings, clockOffsets: timeline.clockOffsets, readings }
    const { window, surgeStartsAt } = await estimates.assembleWindow(parts, run.stationId, question)
    const offset = readings.clockOffsetSeconds === null ? null : -readings.clockOffsetSeconds
    const {
      figures,
      digest,
      detail,
      known: next,
    } = await estimators.run({ window, windowEndsAt, clockOffset: offset, known, past: [] })
    const making = {
      stationId: run.stationId,
      windowStartsAt: windowEndsAt - settings.content.windowSeconds * 1000,
      windowEndsAt,
      surgeStartsAt,
      computedAt: parts.clock.now().getTime(),
      origin: 'recompute' as const,
      deploymentId: deployment.id,
      sensorsDeployed: deployment.sensors.length,
      settingsId: settings.id,
      softwareVersion,
      inputCommitId: readings.newestCommitId,
      resultDigest: digest,
    }
    await saveRunEstimate(parts, run.id, estimates.estimateRow(figures, making), detail)
    return next
  }

  function wake(): Promise<void> {
    running ??= drain()
      .catch((error: unknown) => {
        if (!isStopped && !(error instanceof EstimationFailed && error.kind === 'stopped'))
          parts.logger.error({ error }, 'recomputations could not go on now; they stay due')
      })
      .finally(() => (running = null))
    return running
  }

  const unsubscribe = parts.bus.subscribe('run.ordered', () => void wake())
  const task = options.isUnscheduled
    ? null
    : schedule('30 * * * * *', () => void wake(), { timezone: 'UTC', name: 'recompute' })
  if (!options.isUnscheduled) void wake()

  return {
    wake,
    async stop() {
      isStopped = true
      unsubscribe()
      await task?.destroy()
      await running
    },
  }
}

/** Ends of the run's windows on the grid since 1970, rising. */
function windowsOf({ startsAt, endsAt, stepSeconds }: RunWork): number[] {
  const step = stepSeconds * 1000
  const ends: number[] = []
  for (let end = (Math.floor(startsAt / step) + 1) * step; end <= endsAt; end += step) ends.push(end)
  return ends
}

/** The version named or in force, with what the run sets otherwise. */
function settingsOf(run: RunWork, { settings }: StationTimeline, windowEndsAt: number): SettingsVersion | null {
  const base =
    run.settingsId === null
      ? estimates.inForce(settings, windowEndsAt)
      : (settings.find(({ id }) => id === run.settingsId) ?? null)
  if (!base) return null
  const { windowSeconds, ...changed } = run.changes
  const { content } = base
  return {
    ...base,
    content: {
      ...content,
      windowSeconds: windowSeconds ?? content.windowSeconds,
      estimate: { ...content.estimate, ...changed },
    },
  }
}

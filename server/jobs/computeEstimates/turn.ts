/** One window of one station, from stored readings to a saved estimate. */
import type { QualityTest, UnresolvedReason } from '../../../shared/schemas/estimate.ts'
import { withoutFigures } from '../../../shared/waves/stationClock.ts'
import type { Track } from '../../../shared/waves/trackSystems.ts'
import type { ArrayWindow } from '../../../shared/waves/window.ts'
import { softwareVersion } from '../../config/softwareVersion.ts'
import type { Parts } from '../../config/parts.ts'
import * as estimates from '../../services/estimates.ts'
import type { Mark, Origin, StationTimeline, WindowOutcome } from '../../services/estimates.ts'
import { saveOutlooks } from '../../services/places.ts'
import type { SavedOutlook } from '../../services/places.ts'
import { linkOf, readWindow } from '../../services/readings.ts'
import type { StoredWindow } from '../../services/readings.ts'
import type { EstimateAnswer, EstimateTask } from '../../workers/estimateTask.ts'
import { EstimationFailed } from '../../workers/estimators.ts'
import type { Estimators } from '../../workers/estimators.ts'
import { packDetail } from '../../workers/packDetail.ts'

/** A window whose computation failed is tried once more, then marked. */
const tries = 2

export interface Turn {
  timeline: StationTimeline
  mark: Mark
  windowEndsAt: number
  /** Next in order: the watermark moves with it. Otherwise it was noted as late. */
  isNext: boolean
  origin: Origin
  known: { tracks: Track[]; nextKey: number }
}

/** Answers what is known of the wave systems after it; null when no estimate was made. */
export async function takeTurn(parts: Parts, estimators: Estimators, turn: Turn): Promise<Turn['known'] | null> {
  const { timeline, windowEndsAt, mark, isNext } = turn
  const deployment = estimates.inForce(timeline.deployments, windowEndsAt)
  const settings = estimates.inForce(timeline.settings, windowEndsAt)
  const windowMs = (settings?.content.windowSeconds ?? 0) * 1000
  const windowStartsAt = windowEndsAt - windowMs
  const unseen: WindowOutcome = { mark, windowStartsAt, windowEndsAt, isNext, inputCommitId: Number.MAX_SAFE_INTEGER }
  // Without a survey or settings there is nothing to compute with, and nothing that later readings would change.
  if (!deployment || !settings) return passOver(parts, unseen)

  const readings = await readWindow(timeline.id, estimates.readingsFrom(windowEndsAt, settings), windowEndsAt, {
    letters: deployment.sensors.map(({ letter }) => letter),
    sampleRate: settings.sampleRate ?? undefined,
  })
  const outcome = { ...unseen, inputCommitId: readings.newestCommitId }
  const change = readings.leftOut !== null && readings.leftOut.until > windowStartsAt ? readings.leftOut : null
  const isEmpty = change === null && !hasSamples(readings, settings.content.windowSeconds)
  if (isEmpty && (isNext || !(await isEstimated(parts, outcome)))) return passOver(parts, outcome)
  if (!isNext && turn.origin !== 'recompute' && (await isKnown(parts, outcome))) return passOver(parts, outcome)

  const question = { windowEndsAt, deployment, settings, clockOffsets: timeline.clockOffsets, readings }
  const { window, surgeStartsAt } = await estimates.assembleWindow(parts, timeline.id, question)
  const clockOffset = clockOffsetOf(turn, readings)
  const hopMs = settings.content.hopSeconds * 1000
  const past = await estimates.pastFigures(parts, timeline.id, windowEndsAt, hopMs)
  const task = { window, windowEndsAt, clockOffset, known: turn.known, past }
  const answer = change
    ? overRateChange(task, change, readings.sampleRate)
    : isEmpty
      ? nothingThere(task)
      : await compute(parts, estimators, turn, task)
  const making = {
    stationId: timeline.id,
    windowStartsAt,
    windowEndsAt,
    surgeStartsAt,
    computedAt: parts.clock.now().getTime(),
    origin: originOf(turn, readings),
    deploymentId: deployment.id,
    sensorsDeployed: deployment.sensors.length,
    settingsId: settings.id,
    softwareVersion,
    inputCommitId: readings.newestCommitId,
    resultDigest: answer.digest,
  }
  let outlooks: SavedOutlook[] = []
  const computed = { figures: answer.figures, making, detail: answer.detail }
  await estimates.saveEstimate(parts, outcome, computed, async (transaction) => {
    outlooks = await saveOutlooks(parts, making, transaction)
  })
  for (const saved of outlooks) parts.bus.publish('outlook.saved', saved)
  return answer.known
}

async function passOver(parts: Parts, outcome: WindowOutcome): Promise<null> {
  await estimates.passOver(parts, outcome)
  return null
}

/** Readings were taken out again: what was estimated of them must not stay the last word. */
const isEstimated = (parts: Parts, { mark, windowEndsAt }: WindowOutcome): Promise<boolean> =>
  estimates.hasSeen(parts, mark.stationId, windowEndsAt, 0)

/** A note can outlive its cause: the window was computed after the readings had come. */
const isKnown = (parts: Parts, { mark, windowEndsAt, inputCommitId }: WindowOutcome): Promise<boolean> =>
  estimates.hasSeen(parts, mark.stationId, windowEndsAt, inputCommitId)

function hasSamples({ series, sampleRate, sampleCount }: StoredWindow, windowSeconds: number): boolean {
  if (sampleCount === 0) return false
  const length = Math.round(windowSeconds * sampleRate)
  return series.some((values) => values.subarray(Math.max(0, values.length - length)).some((value) => value === value))
}

/** Station's clock less the server's: of the link now for a live window, of its readings otherwise. */
function clockOffsetOf({ origin, timeline }: Turn, { clockOffsetSeconds }: StoredWindow): number | null {
  const ofReadings = clockOffsetSeconds === null ? null : -clockOffsetSeconds
  return origin === 'live' ? (linkOf(timeline.id).clockOffsetSeconds ?? ofReadings) : ofReadings
}

/** Readings that never came over the link are an import, whichever way the window came up. */
function originOf({ origin, isNext }: Turn, { sources }: StoredWindow): Origin {
  const isImported = sources.every((source) => source === 'import' || source === 'demonstration')
  return isImported && (isNext || origin === 'late') ? 'import' : origin
}

async function compute(parts: Parts, estimators: Estimators, turn: Turn, task: EstimateTask): Promise<EstimateAnswer> {
  const { code } = turn.timeline
  for (let count = 1; ; count += 1) {
    try {
      return await estimators.run(task)
    } catch (error) {
      if (!(error instanceof EstimationFailed) || error.kind === 'stopped') throw error
      const window = `${code}/${new Date(turn.windowEndsAt).toISOString()}`
      parts.logger.error({ window, kind: error.kind, detail: error.message, count }, 'estimation failed')
      if (count >= tries) return notComputed(task, error)
    }
  }
}

/** What is saved of a window whose computation failed twice: that it failed, and why. */
function notComputed(task: EstimateTask, failure: EstimationFailed): EstimateAnswer {
  const [whatFailed] = failure.message.split('\n')
  return withoutEstimate(task, 'not-computed', {
    test: 'computation',
    flag: 2,
    detail: `The computation failed twice (${failure.kind}: ${whatFailed})`,
  })
}

/** What is saved of a window in which the station changed its sample rate: half of it is no whole record. */
function overRateChange(
  task: EstimateTask,
  before: NonNullable<StoredWindow['leftOut']>,
  sampleRate: number,
): EstimateAnswer {
  const until = new Date(before.until).toISOString()
  const detail = `Until ${until} the readings came at ${before.sampleRate} Hz, then at ${sampleRate} Hz: no window over the change is computed` // prettier-ignore
  return withoutEstimate(task, 'too-little-data', { test: 'gap', flag: 9, detail })
}

/** What is saved of a window that was estimated and has no readings any more. */
const nothingThere = (task: EstimateTask): EstimateAnswer =>
  withoutEstimate(task, 'too-little-data', { test: 'gap', flag: 9, detail: 'Its readings were taken out again' })

function withoutEstimate(
  { window, known }: EstimateTask,
  reason: UnresolvedReason,
  test: Pick<QualityTest, 'test' | 'flag' | 'detail'>,
): EstimateAnswer {
  const bare = {
    reason,
    qualityFlag: test.flag,
    waterDepth: window.waterDepth,
    waterDepthSource: window.waterDepthSource,
    completeness: presentShare(window),
    sensors: [],
  }
  const result = withoutFigures({ ...bare, tests: [{ ...test, value: null, limit: null }] })
  return { figures: result, known, digest: '', detail: packDetail(result) }
}

function presentShare({ series }: ArrayWindow): number {
  let present = 0
  let all = 0
  for (const values of series) for (const value of values) present += value === value ? 1 : 0
  for (const values of series) all += values.length
  return all === 0 ? 0 : present / all
}

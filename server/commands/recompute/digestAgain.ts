/** The fingerprint that a stored estimate gets when it is computed again from what its computation had seen. */
import type { EstimateResult } from '../../../shared/schemas/estimate.ts'
import type { ArrayWindow } from '../../../shared/waves/window.ts'
import type { Parts } from '../../config/parts.ts'
import { assembleWindow, readingsFrom } from '../../services/estimates.ts'
import type { StationTimeline, StoredEstimate } from '../../services/estimates.ts'
import { readWindow } from '../../services/readings.ts'
import { resultDigest } from '../../workers/resultDigest.ts'

/** Null where survey, settings or readings are no longer there. */
export async function digestAgain(
  parts: Pick<Parts, 'sequelize'>,
  timeline: StationTimeline,
  stored: StoredEstimate,
  estimate: (window: ArrayWindow) => EstimateResult,
): Promise<string | null> {
  const windowEndsAt = stored.windowEndsAt.getTime()
  const deployment = timeline.deployments.find(({ id }) => id === stored.deploymentId)
  const settings = timeline.settings.find(({ id }) => id === stored.settingsId)
  if (!deployment || !settings) return null
  const readings = await readWindow(stored.stationId, readingsFrom(windowEndsAt, settings), windowEndsAt, {
    letters: deployment.sensors.map(({ letter }) => letter),
    upToCommitId: stored.inputCommitId,
  })
  if (readings.sampleCount === 0) return null
  const clockOffsets = timeline.clockOffsets.filter(({ recordedAt }) => recordedAt <= stored.computedAt.getTime())
  const question = { windowEndsAt, deployment, settings, clockOffsets, readings }
  const { window } = await assembleWindow(parts, stored.stationId, question)
  // A level from a gauge or a table may have been put right since: what was used then stands in the estimate.
  const depth = stored.waterDepthSource === 'level' ? {} : pickDepth(stored)
  return resultDigest(estimate({ ...window, ...depth }))
}

const pickDepth = ({ waterDepth, waterDepthSource }: StoredEstimate) => ({ waterDepth, waterDepthSource })

/** Which blocks the frames of one minute become. */
import { countPresent, joinSpans, lengthOf } from '../../../shared/readings/span.ts'
import type { SampleSpan } from '../../../shared/readings/span.ts'
import type { Block } from './blocks.ts'
import { groupBy } from './groupBy.ts'
import { packBlock } from './payload.ts'
import type { Deployments } from './station.ts'

const minuteMs = 60_000

export interface FramePiece {
  /** Start of the minute that it lies in, ms since 1970 UTC. */
  minute: number
  commitId: number
  /** Arrived less sent, s. */
  clockOffset: number
  span: SampleSpan
}

/** Estimates saw the readings from `startsAt` to `endsAt` as they stood at `commitId`. */
export interface EstimateView {
  commitId: number
  startsAt: number
  endsAt: number
}

interface MinuteContext {
  stationId: number
  minute: number
  /** By rising commit. */
  views: readonly EstimateView[]
  /** Highest part of this minute so far; -1 for none. */
  newestPart: number
  deployments: Deployments
}

export function blocksOfMinute(pieces: readonly FramePiece[], context: MinuteContext): Block[] {
  const { stationId, minute, newestPart } = context
  const views = context.views.filter(({ startsAt, endsAt }) => startsAt < minute + minuteMs && endsAt > minute)
  const viewsBefore = ({ commitId }: FramePiece) => views.filter((view) => view.commitId < commitId).length
  const groups = groupBy(pieces, (piece) => `${piece.span.sampleRate}/${viewsBefore(piece)}`)
  return [...groups.values()].map((group, index) => {
    const span = joinSpans(group.map((piece) => piece.span))
    const commits = group.map(({ commitId }) => commitId)
    const firstCommitId = Math.min(...commits)
    const present = countPresent(span)
    const usedBefore = views.some((view) => view.commitId < firstCommitId && view.endsAt >= minute + minuteMs)
    return {
      stationId,
      startsAt: minute,
      part: newestPart + 1 + index,
      deploymentId: deploymentOf(context, minute),
      firstCommitId,
      lastCommitId: Math.max(...commits),
      source: usedBefore ? 'late' : 'live',
      importId: null,
      sampleRate: span.sampleRate,
      sampleCount: present,
      missingCount: lengthOf(span) * span.letters.length - present,
      clockOffset: medianOf(group.map(({ clockOffset }) => clockOffset)),
      ...packBlock(span),
    }
  })
}

/** The one in force when the minute began; where there was none yet, the first after it. */
function deploymentOf({ deployments, stationId }: MinuteContext, minute: number): number {
  const deployment = deployments.at(minute) ?? deployments.at(minute + minuteMs) ?? deployments.at(Infinity)
  if (!deployment) throw new Error(`station ${stationId} has readings and no deployment`)
  return deployment.id
}

const medianOf = (values: readonly number[]): number | null =>
  values.toSorted((a, b) => a - b)[Math.floor(values.length / 2)] ?? null

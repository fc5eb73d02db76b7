/**
 * Which station feeds a place at a moment: the first in its order whose newest estimate is neither stale nor refused. A substitute is
 * said, with what keeps those before it, and widens ±. Times in ms since 1970 UTC.
 */
import { flagOf } from '../alerts/figures.ts'
import type { SeaEstimate } from '../hazards/sea.ts'
import type { EstimateResult } from '../schemas/estimate.ts'
import type { PlaceKind } from '../schemas/placeQuantity.ts'
import { momentUtc } from '../times.ts'
import { unresolvedWords } from '../unresolvedWords.ts'
import { metres } from '../units.ts'

/** The newest estimate of a station that ended at the moment asked for or before. */
export interface FeedEstimate
  extends
    SeaEstimate,
    Pick<EstimateResult, 'resolved' | 'reason' | 'qualityFlag' | 'surgeHeight'>,
    Partial<Pick<EstimateResult, 'surgeSpectrum'>> {
  windowStartsAt: number
  windowEndsAt: number
  revision: number
}

export interface FeedStation {
  id: number
  name: string
  staleAfterSeconds: number
  /** Null: it never had one. */
  estimate: FeedEstimate | null
}

export interface Feed {
  station: FeedStation
  estimate: FeedEstimate
  /** Place in the order; 0: the place's own station. */
  index: number
}

/** Why a station cannot feed a place of this kind at a moment, to follow its name; null: it can. */
export function refusalOf({ estimate, staleAfterSeconds }: FeedStation, kind: PlaceKind, at: number): string | null {
  if (!estimate) return 'has no estimate'
  if (at - estimate.windowEndsAt > staleAfterSeconds * 1000) {
    return `is stale, last estimate ${momentUtc(estimate.windowEndsAt, at)} UTC`
  }
  // A berth asks for long waves alone: the direction has no part.
  if (kind === 'berth') {
    if (flagOf(estimate, false) > 3) return `has failed: ${sentenceOf(estimate)}`
    return estimate.surgeHeight === null ? 'has no hour of readings for long waves' : null
  }
  if (!estimate.resolved || estimate.systems.length === 0) {
    const height = estimate.significantWaveHeight === null ? '' : `, H_m0 ${metres(estimate.significantWaveHeight, 2)}`
    return `gives no direction: ${sentenceOf(estimate)}${height}`
  }
  return estimate.qualityFlag > 3 ? 'has failed its quality tests' : null
}

function sentenceOf({ reason, resolved }: FeedEstimate): string {
  if (resolved) return 'its quality tests'
  const { title } = unresolvedWords(reason)
  return title.charAt(0).toLowerCase() + title.slice(1)
}

/** Stations in the place's order. `refusals`: those before the one that feeds, or all where none does. */
export function chooseFeed(
  stations: FeedStation[],
  kind: PlaceKind,
  at: number,
): { feed: Feed | null; refusals: string[] } {
  const refusals: string[] = []
  for (const [index, station] of stations.entries()) {
    const refusal = refusalOf(station, kind, at)
    if (refusal === null && station.estimate) return { feed: { station, estimate: station.estimate, index }, refusals }
    refusals.push(`${station.name} ${refusal ?? 'has no estimate'}`)
  }
  return { feed: null, refusals }
}

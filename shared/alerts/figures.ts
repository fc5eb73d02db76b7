/** What limits look at: the figures of one estimate, and the health of the record and of the program. SI units. */
import type { QualityFlag, UnresolvedReason } from '../schemas/estimate.ts'
import type { PlaceQuantityKey } from '../schemas/placeQuantity.ts'

/** One wave system; null where the estimate has none of that name. Directions are toward, degrees true. */
export interface SystemFigures {
  height: number | null
  period: number | null
  toward: number | null
  towardSd: number | null
  speed: number | null
  speedSd: number | null
}

/** One figure of a place's outlook. */
export interface PlaceFigure {
  value: number
  sd: number | null
  /** Where it says the uncertainty better than ±. */
  likely: { from: number; to: number } | null
  qualityFlag: QualityFlag
  /** `spilling to plunging`, `from the port quarter, setting to starboard`. */
  words: string | null
}

/** What the sea means at a place; a quantity without a figure is missing. */
export interface SeaAtPlace {
  figures: Partial<Record<PlaceQuantityKey, PlaceFigure>>
  /** The station behind it; null where none could feed the place. */
  stationName: string | null
  /** `Not measured here. …`; null at the place's own station. */
  substituteWords: string | null
}

export interface SeaFigures {
  resolved: boolean
  reason: UnresolvedReason | null
  qualityFlag: QualityFlag
  significantWaveHeight: number | null
  significantWaveHeightSd: number | null
  peakPeriod: number | null
  meanPeriod: number | null
  energyPeriod: number | null
  energyFlux: number | null
  surgeHeight: number | null
  leading: SystemFigures
  swell: SystemFigures
  windSea: SystemFigures
  /** Of a place's limits: the outlook that was made of this estimate. */
  atPlace?: SeaAtPlace
}

/** Null: cannot be told now. */
export interface HealthFigures {
  /** Seconds since the end of the newest window that gave a usable height, or since the station was entered. */
  dataAge: number | null
  usableSensors: number | null
  /** Station's clock less the server's, without its sign, s. */
  clockOffset: number | null
  /** 1 while parts of the array disagree so that no vector is given, else 0. */
  arrayDisagreement: number | null
  /** Seconds that the oldest e-mail not out has been waiting. */
  mailQueueAge: number | null
  /** Share of the disk that is free, 0 to 1. */
  diskFree: number | null
}

/** Either may be missing: a limit on what is missing is not judged. */
export interface Seen {
  sea: SeaFigures | null
  health: HealthFigures | null
}

/**
 * A quantity as it is read. NaN stands for "not there" inside the comparisons alone, where a year of packed values
 * passes through; it never leaves `shared/alerts`.
 */
export interface Reading {
  value: number
  /** One standard deviation; NaN where it is not known. */
  sd: number
  /** An upper bound where the value itself is not there, such as the height of a system that was not found. */
  atMost: number
}

export const nothing: Reading = { value: NaN, sd: NaN, atMost: NaN }

/** These refuse a direction while height and period stand. */
const directionOnly: UnresolvedReason[] = [
  'no-resolvable-wave',
  'ambiguous',
  'geometry-doubtful',
  'collinear-array',
  'standing-sea',
  'surf-zone',
]

/**
 * The flag that a quantity carries. A refused vector does not fail the height: a calm that clears has no resolvable
 * wave, and an ambiguous direction must not silence a height. Such heights count as suspect.
 */
export function flagOf(sea: Pick<SeaFigures, 'resolved' | 'reason' | 'qualityFlag'>, isOfVector: boolean): QualityFlag {
  if (sea.resolved || isOfVector) return sea.resolved ? sea.qualityFlag : 4
  return sea.reason !== null && directionOnly.includes(sea.reason) ? 3 : sea.qualityFlag === 9 ? 9 : 4
}

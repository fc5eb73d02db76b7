/** An estimate as a row of its table, and a row as the API shows it. */
import type { z } from 'zod'
import { currentEstimate } from '../../../shared/schemas/station.ts'
import type { CurrentEstimate, EstimateView } from '../../../shared/schemas/station.ts'
import type { EstimateResult } from '../../../shared/schemas/estimate.ts'
import type { Estimate } from '../../models/index.ts'
import type { InferAttributes } from 'sequelize'

export type EstimateRow = InferAttributes<Estimate>
export type Origin = EstimateRow['origin']

/** What of a result stands in columns. */
export type EstimateFigures = Pick<
  EstimateResult,
  | 'resolved'
  | 'reason'
  | 'qualityFlag'
  | 'completeness'
  | 'waterDepth'
  | 'waterDepthSource'
  | 'significantWaveHeight'
  | 'significantWaveHeightSd'
  | 'peakPeriod'
  | 'meanPeriod'
  | 'energyPeriod'
  | 'energyFlux'
  | 'surgeHeight'
  | 'systems'
  | 'sensors'
>

/** How an estimate was made. Times are milliseconds since 1970 UTC. */
export interface EstimateMaking {
  stationId: number
  windowStartsAt: number
  windowEndsAt: number
  surgeStartsAt: number | null
  computedAt: number
  origin: Origin
  deploymentId: number
  sensorsDeployed: number
  settingsId: number
  softwareVersion: string
  inputCommitId: number | null
  resultDigest: string
}

const leadingSystem = ([leading]: EstimateResult['systems']) => ({
  height: leading?.significantWaveHeight ?? null,
  period: leading?.peakPeriod ?? null,
  towardDegrees: leading?.toward ?? null,
  towardDegreesSd: leading?.headingSd ?? null,
  measuredSpeed: leading?.measuredSpeed ?? null,
  speed: leading?.speed ?? null,
  speedSd: leading?.speedSd ?? null,
  linearSpeed: leading?.linearSpeed ?? null,
  directionalSpread: leading?.directionalSpread ?? null,
  slownessEast: leading?.slownessEast ?? null,
  slownessNorth: leading?.slownessNorth ?? null,
  covarianceEastEast: leading?.slownessCovariance.eastEast ?? null,
  covarianceEastNorth: leading?.slownessCovariance.eastNorth ?? null,
  covarianceNorthNorth: leading?.slownessCovariance.northNorth ?? null,
})

/** The highest swell and the highest wind sea, wherever they stand in the order. */
function namedSystems(systems: EstimateResult['systems']) {
  const [swell, windSea] = (['swell', 'wind sea'] as const).map((name) => systems.find((one) => one.name === name))
  return {
    swellHeight: swell?.significantWaveHeight ?? null,
    swellPeriod: swell?.peakPeriod ?? null,
    swellTowardDegrees: swell?.toward ?? null,
    swellTowardDegreesSd: swell?.headingSd ?? null,
    swellSpeed: swell?.speed ?? null,
    swellSpeedSd: swell?.speedSd ?? null,
    windSeaHeight: windSea?.significantWaveHeight ?? null,
    windSeaPeriod: windSea?.peakPeriod ?? null,
    windSeaTowardDegrees: windSea?.toward ?? null,
    windSeaTowardDegreesSd: windSea?.headingSd ?? null,
    windSeaSpeed: windSea?.speed ?? null,
    windSeaSpeedSd: windSea?.speedSd ?? null,
  }
}

/** The columns of run 0; the revision is counted when the row is written. */
export function estimateRow(
  figures: EstimateFigures,
  { windowStartsAt, windowEndsAt, surgeStartsAt, computedAt, ...making }: EstimateMaking,
): Omit<EstimateRow, 'revision'> {
  const { systems, sensors, ...columns } = pickColumns(figures)
  return {
    ...making,
    runId: 0,
    windowStartsAt: new Date(windowStartsAt),
    windowEndsAt: new Date(windowEndsAt),
    surgeStartsAt: surgeStartsAt === null ? null : new Date(surgeStartsAt),
    computedAt: new Date(computedAt),
    ...columns,
    sensorsUsed: sensors.filter(({ used }) => used).length,
    ...leadingSystem(systems),
    ...namedSystems(systems),
  }
}

const pickColumns = (figures: EstimateFigures): EstimateFigures => ({
  resolved: figures.resolved,
  reason: figures.reason,
  qualityFlag: figures.qualityFlag,
  completeness: figures.completeness,
  waterDepth: figures.waterDepth,
  waterDepthSource: figures.waterDepthSource,
  significantWaveHeight: figures.significantWaveHeight,
  significantWaveHeightSd: figures.significantWaveHeightSd,
  peakPeriod: figures.peakPeriod,
  meanPeriod: figures.meanPeriod,
  energyPeriod: figures.energyPeriod,
  energyFlux: figures.energyFlux,
  surgeHeight: figures.surgeHeight,
  systems: figures.systems,
  sensors: figures.sensors,
})

const iso = (date: Date): string => date.toISOString()

/** The API's short form. Booleans come from raw rows as 0 and 1. */
export function presentEstimate(row: EstimateRow, systems: CurrentEstimate['systems']): CurrentEstimate {
  const shown: z.input<typeof currentEstimate> = {
    stationId: row.stationId,
    windowStartsAt: iso(row.windowStartsAt),
    windowEndsAt: iso(row.windowEndsAt),
    revision: row.revision,
    computedAt: iso(row.computedAt),
    origin: row.origin,
    resolved: Boolean(row.resolved),
    reason: currentEstimate.shape.reason.parse(row.reason),
    qualityFlag: currentEstimate.shape.qualityFlag.parse(row.qualityFlag),
    completeness: row.completeness,
    significantWaveHeight: row.significantWaveHeight,
    significantWaveHeightSd: row.significantWaveHeightSd,
    peakPeriod: row.peakPeriod,
    meanPeriod: row.meanPeriod,
    waterDepth: row.waterDepth,
    surgeHeight: row.surgeHeight,
    sensorsUsed: row.sensorsUsed,
    sensorsDeployed: row.sensorsDeployed,
    systems,
  }
  return shown
}

export const inventedNote = 'invented for the demonstration, no readings behind it'

/** The API's long form, with how it was made. */
export function presentWhole(row: EstimateRow, detail: EstimateResult | null): EstimateView {
  const isInvented = row.origin === 'demonstration'
  return {
    ...presentEstimate(row, detail?.systems ?? []),
    deploymentId: row.deploymentId,
    settingsId: row.settingsId,
    softwareVersion: row.softwareVersion,
    inputCommitId: row.inputCommitId === null ? null : Number(row.inputCommitId),
    resultDigest: row.resultDigest,
    detail,
    note: isInvented ? inventedNote : null,
  }
}

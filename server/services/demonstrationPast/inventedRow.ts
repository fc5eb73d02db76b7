/**
 * An invented estimate as text for an INSERT. Not by way of an object a row: a quarter of a million objects of forty
 * fields cost half a minute of collecting them again.
 */
import type { InventedFigures } from './inventedEstimate.ts'

/** The same in all rows that share settings and deployment. */
export interface SharedColumns {
  stationId: number
  /** ms since 1970 UTC. */
  computedAt: number
  deploymentId: number
  settingsId: number
  softwareVersion: string
  resultDigest: string
  sensorsDeployed: number
}

/** In the order of `rowText`. What is not here stays null. */
export const columns = `stationId, runId, revision, origin, computedAt, deploymentId, settingsId, softwareVersion,
  resultDigest, sensorsUsed, sensorsDeployed, windowEndsAt, windowStartsAt, completeness, resolved, reason, qualityFlag,
  waterDepth, waterDepthSource, significantWaveHeight, significantWaveHeightSd, peakPeriod, meanPeriod, energyPeriod,
  energyFlux, height, period, towardDegrees, towardDegreesSd, measuredSpeed, speed, speedSd, linearSpeed,
  directionalSpread, slownessEast, slownessNorth, covarianceEastEast, covarianceEastNorth, covarianceNorthNorth,
  swellHeight, swellPeriod, swellTowardDegrees, swellTowardDegreesSd, swellSpeed, swellSpeedSd,
  windSeaHeight, windSeaPeriod, windSeaTowardDegrees, windSeaTowardDegreesSd, windSeaSpeed, windSeaSpeedSd`

const time = (ms: number): string => `'${new Date(ms).toISOString().slice(0, 23).replace('T', ' ')}'`
const number = (value: number | null | undefined): string =>
  value === null || value === undefined || !Number.isFinite(value) ? 'NULL' : String(value)

/** The beginning of each row that shares these. `escape` quotes a text for the database. */
export const sharedText = (shared: SharedColumns, escape: (text: string) => string): string =>
  [
    shared.stationId,
    0,
    1,
    "'demonstration'",
    time(shared.computedAt),
    shared.deploymentId,
    shared.settingsId,
    escape(shared.softwareVersion),
    escape(shared.resultDigest),
    shared.sensorsDeployed,
    shared.sensorsDeployed,
  ].join(',')

function namedNumbers(systems: InventedFigures['systems'], name: 'swell' | 'wind sea'): (number | null | undefined)[] {
  const one = systems.find((system) => system.name === name)
  return [one?.significantWaveHeight, one?.peakPeriod, one?.toward, one?.headingSd, one?.speed, one?.speedSd]
}

export function rowText(
  shared: string,
  windowEndsAt: number,
  windowSeconds: number,
  figures: InventedFigures,
  escape: (text: string) => string,
): string {
  const [leading] = figures.systems
  const covariance = leading?.slownessCovariance
  const reason = figures.reason === null ? 'NULL' : escape(figures.reason)
  const begin = `${shared},${time(windowEndsAt)},${time(windowEndsAt - windowSeconds * 1000)},${figures.completeness}`
  const judged = `${figures.resolved ? 1 : 0},${reason},${figures.qualityFlag},${figures.waterDepth}`
  const numbers = [
    figures.significantWaveHeight,
    figures.significantWaveHeightSd,
    figures.peakPeriod,
    figures.meanPeriod,
    figures.energyPeriod,
    figures.energyFlux,
    leading?.significantWaveHeight,
    leading?.peakPeriod,
    leading?.toward,
    leading?.headingSd,
    leading?.measuredSpeed,
    leading?.speed,
    leading?.speedSd,
    leading?.linearSpeed,
    leading?.directionalSpread,
    leading?.slownessEast,
    leading?.slownessNorth,
    covariance?.eastEast,
    covariance?.eastNorth,
    covariance?.northNorth,
    ...namedNumbers(figures.systems, 'swell'),
    ...namedNumbers(figures.systems, 'wind sea'),
  ]
  return `(${begin},${judged},${escape(figures.waterDepthSource)},${numbers.map(number).join(',')})`
}

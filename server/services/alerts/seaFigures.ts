/** Rows of estimates as limits look at them: the current revision of the operational run. */
import type { Sequelize, Transaction } from 'sequelize'
import type { SeaFigures } from '../../../shared/alerts/figures.ts'
import { qualityFlag, unresolvedReason } from '../../../shared/schemas/estimate.ts'
import { select } from '../../models/sql.ts'
import type { SqlValues } from '../../models/sql.ts'

export interface SeaWindow {
  /** ms since 1970 UTC. */
  windowEndsAt: number
  revision: number
  origin: string
  sea: SeaFigures
}

interface SeaRow {
  windowEndsAt: Date
  revision: number
  origin: string
  resolved: number
  reason: string | null
  qualityFlag: number
  [figure: string]: unknown
}

const figureColumns = [
  'significantWaveHeight', 'significantWaveHeightSd', 'peakPeriod', 'meanPeriod', 'energyPeriod', 'energyFlux',
  'surgeHeight', 'height', 'period', 'towardDegrees', 'towardDegreesSd', 'speed', 'speedSd',
  ...['swell', 'windSea'].flatMap((name) =>
    ['Height', 'Period', 'TowardDegrees', 'TowardDegreesSd', 'Speed', 'SpeedSd'].map((figure) => name + figure)),
] // prettier-ignore

function presentSea(row: SeaRow): SeaWindow {
  const number = (name: string): number | null => {
    const value = row[name]
    return typeof value === 'number' ? value : null
  }
  const system = (name: (figure: string) => string) => ({
    height: number(name('Height')),
    period: number(name('Period')),
    toward: number(name('TowardDegrees')),
    towardSd: number(name('TowardDegreesSd')),
    speed: number(name('Speed')),
    speedSd: number(name('SpeedSd')),
  })
  const lowered = (figure: string) => figure.charAt(0).toLowerCase() + figure.slice(1)
  return {
    windowEndsAt: row.windowEndsAt.getTime(),
    revision: row.revision,
    origin: row.origin,
    sea: {
      resolved: Boolean(row.resolved),
      reason: unresolvedReason.nullable().parse(row.reason),
      qualityFlag: qualityFlag.parse(row.qualityFlag),
      significantWaveHeight: number('significantWaveHeight'),
      significantWaveHeightSd: number('significantWaveHeightSd'),
      peakPeriod: number('peakPeriod'),
      meanPeriod: number('meanPeriod'),
      energyPeriod: number('energyPeriod'),
      energyFlux: number('energyFlux'),
      surgeHeight: number('surgeHeight'),
      leading: system(lowered),
      swell: system((figure) => `swell${figure}`),
      windSea: system((figure) => `windSea${figure}`),
    },
  }
}

async function read(sequelize: Sequelize, which: string, values: SqlValues, transaction?: Transaction) {
  const rows = await select<SeaRow>(
    sequelize,
    `SELECT e.windowEndsAt, e.revision, e.origin, e.resolved, e.reason, e.qualityFlag,
       ${figureColumns.map((name) => `e.${name}`).join(', ')}
     FROM estimates e WHERE e.stationId = :stationId AND e.runId = 0 AND ${which}`,
    values,
    transaction,
  )
  return rows.map(presentSea)
}

const isCurrent = `NOT EXISTS (SELECT 1 FROM estimates newer WHERE newer.stationId = e.stationId
  AND newer.windowEndsAt = e.windowEndsAt AND newer.runId = 0 AND newer.revision > e.revision)`

/** Windows that end after `from` and not after `to`, rising in time. */
export const seaBetween = (
  sequelize: Sequelize,
  stationId: number,
  from: number,
  to: number,
  most = 1_000_000,
): Promise<SeaWindow[]> =>
  read(
    sequelize,
    `e.windowEndsAt > :from AND e.windowEndsAt <= :to AND ${isCurrent} ORDER BY e.windowEndsAt LIMIT :most`,
    { stationId, from: new Date(from), to: new Date(to), most },
  )

/** The windows that end at these very moments. */
export async function seaAt(sequelize: Sequelize, stationId: number, ends: number[]): Promise<Map<number, SeaFigures>> {
  if (ends.length === 0) return new Map()
  const which = `e.windowEndsAt IN (:ends) AND ${isCurrent}`
  const windows = await read(sequelize, which, { stationId, ends: ends.map((end) => new Date(end)) })
  return new Map(windows.map(({ windowEndsAt, sea }) => [windowEndsAt, sea]))
}

/** Windows computed or computed anew in a while, among those that ended in a span: what came late. */
export const seaComputedBetween = (
  sequelize: Sequelize,
  stationId: number,
  computed: { since: number; until: number },
  from: number,
  to: number,
): Promise<SeaWindow[]> =>
  read(
    sequelize,
    `e.windowEndsAt > :from AND e.windowEndsAt <= :to AND e.computedAt > :since AND e.computedAt <= :until
     AND e.origin IN ('late', 'import') AND ${isCurrent} ORDER BY e.windowEndsAt`,
    {
      stationId,
      since: new Date(computed.since),
      until: new Date(computed.until),
      from: new Date(from),
      to: new Date(to),
    },
  )

/** Estimates as they are shown. Current is the highest revision of the operational run. */
import { promisify } from 'node:util'
import { inflateRaw } from 'node:zlib'
import type { Sequelize } from 'sequelize'
import type { EstimateResult } from '../../../shared/schemas/estimate.ts'
import type { CurrentEstimate, EstimateView } from '../../../shared/schemas/station.ts'
import type { Parts } from '../../config/parts.ts'
import { select } from '../../models/sql.ts'
import type { SqlValues } from '../../models/sql.ts'
import { presentEstimate, presentWhole } from './row.ts'
import type { EstimateRow } from './row.ts'

const inflate = promisify(inflateRaw)

interface StoredRow extends EstimateRow {
  payload: Buffer | null
}

const rowsWithDetail = `
  SELECT e.*, d.payload FROM estimates e LEFT JOIN estimateDetails d
    ON d.stationId = e.stationId AND d.windowEndsAt = e.windowEndsAt AND d.runId = e.runId AND d.revision = e.revision`

const isNewestRevision = `
  NOT EXISTS (SELECT 1 FROM estimates newer WHERE newer.stationId = e.stationId
    AND newer.windowEndsAt = e.windowEndsAt AND newer.runId = e.runId AND newer.revision > e.revision)`

const read = (sequelize: Sequelize, condition: string, values: SqlValues): Promise<StoredRow[]> =>
  select<StoredRow>(
    sequelize,
    `${rowsWithDetail} WHERE e.stationId = :stationId AND e.runId = 0 AND ${condition}`,
    values,
  )

async function detailOf(row: StoredRow): Promise<EstimateResult | null> {
  if (!row.payload) return null
  const detail: EstimateResult = JSON.parse((await inflate(row.payload)).toString('utf8'))
  return detail
}

const present = async (row: StoredRow): Promise<CurrentEstimate> =>
  presentEstimate(row, (await detailOf(row))?.systems ?? [])

/** The newest estimate of a station, however old: its reader judges the age. */
export async function currentEstimateOf({ sequelize }: Parts, stationId: number): Promise<CurrentEstimate | null> {
  const condition = 'TRUE ORDER BY e.windowEndsAt DESC, e.revision DESC LIMIT 1'
  const [row] = await read(sequelize, condition, { stationId })
  return row ? present(row) : null
}

/** A vector older than this is no longer told as the last good one. */
const rememberedMs = 30 * 24 * 3_600_000

/** The newest estimate with a vector that can be trusted. */
export async function lastGoodEstimateOf({ sequelize, clock }: Parts, stationId: number) {
  const condition = `e.resolved AND e.qualityFlag IN (1, 3) AND e.windowEndsAt >= :since AND ${isNewestRevision}
    ORDER BY e.windowEndsAt DESC LIMIT 1`
  const since = new Date(clock.now().getTime() - rememberedMs)
  const [row] = await read(sequelize, condition, { stationId, since })
  return row ? present(row) : null
}

/** One window with everything behind it; the newest revision where none is named. */
export async function wholeEstimate(
  { sequelize }: Parts,
  stationId: number,
  windowEndsAt: Date,
  revision: number | null,
): Promise<EstimateView | null> {
  const which = revision === null ? '' : 'AND e.revision = :revision'
  const condition = `e.windowEndsAt = :windowEndsAt ${which} ORDER BY e.revision DESC LIMIT 1`
  const [row] = await read(sequelize, condition, { stationId, windowEndsAt, revision })
  return row ? presentWhole(row, await detailOf(row)) : null
}

/** The newest window with everything behind it. */
export async function wholeLatestEstimate({ sequelize }: Parts, stationId: number): Promise<EstimateView | null> {
  const condition = 'TRUE ORDER BY e.windowEndsAt DESC, e.revision DESC LIMIT 1'
  const [row] = await read(sequelize, condition, { stationId })
  return row ? presentWhole(row, await detailOf(row)) : null
}

/** Current estimates of the windows that end after `from` and not after `to`, rising in time. */
export async function estimatesBetween(
  { sequelize }: Parts,
  stationId: number,
  from: Date,
  to: Date,
): Promise<CurrentEstimate[]> {
  const condition = `e.windowEndsAt > :from AND e.windowEndsAt <= :to AND ${isNewestRevision} ORDER BY e.windowEndsAt`
  const rows = await read(sequelize, condition, { stationId, from, to })
  return Promise.all(rows.map(present))
}

/** Does the newest estimate of this window already rest on this commit of readings, or on a newer one? */
export async function hasSeen(
  { sequelize }: Parts,
  stationId: number,
  windowEndsAt: number,
  commitId: number | null,
): Promise<boolean> {
  const [row] = await select<{ inputCommitId: number | null }>(
    sequelize,
    `SELECT inputCommitId FROM estimates WHERE stationId = :stationId AND windowEndsAt = :windowEndsAt AND runId = 0
     ORDER BY revision DESC LIMIT 1`,
    { stationId, windowEndsAt: new Date(windowEndsAt) },
  )
  return row?.inputCommitId != null && commitId !== null && Number(row.inputCommitId) >= commitId
}

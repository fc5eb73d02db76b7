/** What outlooks are made of: the newest estimates of the stations, with their details, and readings of the water's level. */
import { promisify } from 'node:util'
import { inflateRaw } from 'node:zlib'
import type { Sequelize, Transaction } from 'sequelize'
import type { FeedEstimate, FeedStation } from '../../../shared/places/feed.ts'
import type { LevelReading, LevelReadings } from '../../../shared/places/tide.ts'
import { qualityFlag, unresolvedReason } from '../../../shared/schemas/estimate.ts'
import type { EstimateResult } from '../../../shared/schemas/estimate.ts'
import { select } from '../../models/sql.ts'

const inflate = promisify(inflateRaw)

interface SourceRow {
  windowStartsAt: Date
  windowEndsAt: Date
  revision: number
  resolved: number
  reason: string | null
  qualityFlag: number
  waterDepth: number
  significantWaveHeight: number | null
  significantWaveHeightSd: number | null
  peakPeriod: number | null
  meanPeriod: number | null
  energyPeriod: number | null
  surgeHeight: number | null
  payload: Buffer | null
}

/** Current revisions alone: of a window the highest. */
const newestOf = `
  SELECT e.windowStartsAt, e.windowEndsAt, e.revision, e.resolved, e.reason, e.qualityFlag, e.waterDepth,
    e.significantWaveHeight, e.significantWaveHeightSd, e.peakPeriod, e.meanPeriod, e.energyPeriod, e.surgeHeight,
    d.payload
  FROM estimates e LEFT JOIN estimateDetails d ON d.stationId = e.stationId AND d.windowEndsAt = e.windowEndsAt
    AND d.runId = e.runId AND d.revision = e.revision
  WHERE e.stationId = :stationId AND e.runId = 0 AND e.windowEndsAt <= :at AND e.windowEndsAt > :since
  ORDER BY e.windowEndsAt DESC, e.revision DESC LIMIT 1`

/** Beyond this a station counts as one without an estimate. */
const rememberedMs = 30 * 24 * 3_600_000

async function presentSource({ payload, ...row }: SourceRow): Promise<FeedEstimate> {
  const detail: Partial<EstimateResult> = payload ? JSON.parse((await inflate(payload)).toString('utf8')) : {}
  return {
    windowStartsAt: row.windowStartsAt.getTime(),
    windowEndsAt: row.windowEndsAt.getTime(),
    revision: row.revision,
    resolved: Boolean(row.resolved),
    reason: unresolvedReason.nullable().parse(row.reason),
    qualityFlag: qualityFlag.parse(row.qualityFlag),
    waterDepth: row.waterDepth,
    significantWaveHeight: row.significantWaveHeight,
    significantWaveHeightSd: row.significantWaveHeightSd,
    peakPeriod: row.peakPeriod,
    meanPeriod: row.meanPeriod,
    energyPeriod: row.energyPeriod,
    surgeHeight: row.surgeHeight,
    systems: detail.systems ?? [],
    directionalSpectrum: detail.directionalSpectrum ?? null,
    surgeSpectrum: detail.surgeSpectrum ?? null,
  }
}

export interface Sources {
  stationOf(stationId: number): Promise<FeedStation>
  levelsOf(stationId: number): Promise<LevelReadings>
}

/** As they stand for one moment; each is read once. */
export function sourcesAt(sequelize: Sequelize, at: number, transaction?: Transaction): Sources {
  const stations = new Map<number, Promise<FeedStation>>()
  const levels = new Map<number, Promise<LevelReadings>>()

  async function readStation(stationId: number): Promise<FeedStation> {
    const [named] = await select<{ name: string; staleAfterSeconds: number }>(
      sequelize,
      'SELECT name, staleAfterSeconds FROM stations WHERE id = :stationId',
      { stationId },
      transaction,
    )
    const span = { at: new Date(at), since: new Date(at - rememberedMs) }
    const [row] = await select<SourceRow>(sequelize, newestOf, { stationId, ...span }, transaction)
    const { name, staleAfterSeconds } = named ?? { name: `Station ${stationId}`, staleAfterSeconds: 900 }
    return { id: stationId, name, staleAfterSeconds, estimate: row ? await presentSource(row) : null }
  }

  async function readLevels(stationId: number): Promise<LevelReadings> {
    const [named] = await select<{ name: string }>(sequelize, 'SELECT name FROM stations WHERE id = :stationId', { stationId }, transaction) // prettier-ignore
    const rows = await select<{ kind: string; takenAt: Date; value: number; sd: number | null }>(
      sequelize,
      `SELECT kind, takenAt, value, sd FROM auxiliaryReadings
       WHERE stationId = :stationId AND kind IN ('waterLevel', 'tide') AND qualityFlag IN (1, 2, 3)
         AND takenAt BETWEEN :from AND :to AND (kind = 'tide' OR takenAt <= :at) ORDER BY takenAt`,
      { stationId, at: new Date(at), from: new Date(at - tideSpanMs), to: new Date(at + tideSpanMs) },
      transaction,
    )
    const of = (kind: string): LevelReading[] =>
      rows.filter((row) => row.kind === kind).map(({ takenAt, value, sd }) => ({ at: takenAt.getTime(), value, sd }))
    return { stationName: named?.name ?? '', measured: of('waterLevel'), predicted: of('tide') }
  }

  const once = <Value>(kept: Map<number, Promise<Value>>, id: number, read: (id: number) => Promise<Value>) => {
    const known = kept.get(id) ?? read(id)
    kept.set(id, known)
    return known
  }
  return {
    stationOf: (stationId) => once(stations, stationId, readStation),
    levelsOf: (stationId) => once(levels, stationId, readLevels),
  }
}

/** A tide and a bit: the next high water lies within it. */
const tideSpanMs = 14 * 3_600_000

/** Levels of the sensors over the last days, from what their windows kept, an hour apart. */
import { promisify } from 'node:util'
import { inflateRaw } from 'node:zlib'
import type { EstimateResult, QualityTest } from '../../../shared/schemas/estimate.ts'
import { stationSettingsContent } from '../../../shared/schemas/stationSettings.ts'
import { levelDrift } from '../../../shared/waves/levelDrift.ts'
import type { LevelSample } from '../../../shared/waves/levelDrift.ts'
import { defaultQualityLimits } from '../../../shared/waves/qualityLimits.ts'
import type { Parts } from '../../config/parts.ts'
import { Station, StationSettings } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { notFound } from '../problems.ts'

const inflate = promisify(inflateRaw)
const hourMs = 3_600_000
const hours = 7 * 24
/** A drift is told from half of what a level may be off at once. */
const shareOfLevelLimit = 0.5

interface DetailRow {
  windowEndsAt: Date
  payload: Buffer
}

/** One test a sensor of the newest of these windows; empty where none was kept. Of one deployment alone, for a survey moves levels. */
export async function readLevelDrift(parts: Parts, stationId: number): Promise<QualityTest[]> {
  if (!(await Station.findByPk(stationId))) throw notFound('station', stationId)
  const now = Math.floor(parts.clock.now().getTime() / hourMs) * hourMs
  const rows = await select<DetailRow>(
    parts.sequelize,
    `SELECT e.windowEndsAt, d.payload FROM estimates e JOIN estimateDetails d ON d.stationId = e.stationId
       AND d.windowEndsAt = e.windowEndsAt AND d.runId = e.runId AND d.revision = e.revision
     WHERE e.stationId = :stationId AND e.runId = 0 AND e.windowEndsAt IN (:ends) AND e.origin <> 'demonstration'
       AND e.deploymentId = (SELECT last.deploymentId FROM estimates last WHERE last.stationId = :stationId
         AND last.runId = 0 ORDER BY last.windowEndsAt DESC, last.revision DESC LIMIT 1)
     ORDER BY e.windowEndsAt, e.revision`,
    { stationId, ends: Array.from({ length: hours + 1 }, (_, n) => new Date(now - n * hourMs)) },
  )
  const samples = await Promise.all(rows.map(sampleOf))
  const ids = samples.at(-1)?.depths.map(({ id }) => id) ?? []
  return levelDrift(samples, ids, shareOfLevelLimit * (await levelLimit(stationId)))
}

async function sampleOf({ windowEndsAt, payload }: DetailRow): Promise<LevelSample> {
  const detail: EstimateResult = JSON.parse((await inflate(payload)).toString('utf8'))
  const depths = detail.sensors.flatMap(({ id, waterDepth }) => (waterDepth == null ? [] : [{ id, waterDepth }]))
  return { at: windowEndsAt.getTime(), depths }
}

async function levelLimit(stationId: number): Promise<number> {
  const settings = await StationSettings.findOne({ where: { stationId }, order: [['id', 'DESC']] })
  const limits = settings && stationSettingsContent.parse(settings.content).estimate.quality
  return (limits ?? defaultQualityLimits).neighbourLevel
}

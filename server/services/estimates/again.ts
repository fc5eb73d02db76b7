/** Stored estimates as they are needed to be computed again from what their computation saw. */
import type { Parts } from '../../config/parts.ts'
import { select } from '../../models/sql.ts'

export interface StoredEstimate {
  stationId: number
  windowEndsAt: Date
  revision: number
  computedAt: Date
  deploymentId: number
  settingsId: number
  inputCommitId: number
  resultDigest: string
  softwareVersion: string
  waterDepth: number
  waterDepthSource: 'level' | 'tide' | 'nominal'
}

const storedColumns = `stationId, windowEndsAt, revision, computedAt, deploymentId, settingsId, inputCommitId, resultDigest,
  softwareVersion, waterDepth, waterDepthSource`
/** Made of stored readings, by a computation that did not fail. */
const isFromReadings = `runId = 0 AND origin <> 'demonstration' AND inputCommitId IS NOT NULL AND resultDigest <> ''`

type Needs = Pick<Parts, 'sequelize'>

/** At most `count` estimates, each once, from anywhere in a station's record; `chance` gives numbers of 0 to 1. */
export async function chanceEstimates(
  { sequelize }: Needs,
  stationIds: readonly number[],
  count: number,
  chance: () => number,
): Promise<StoredEstimate[]> {
  const found = new Map<string, StoredEstimate>()
  const spans = new Map<number, { first: number; last: number }>()
  for (const stationId of stationIds) {
    const [row] = await select<{ first: Date | null; last: Date | null }>(
      sequelize,
      `SELECT MIN(windowEndsAt) AS first, MAX(windowEndsAt) AS last FROM estimates
       WHERE stationId = :stationId AND ${isFromReadings}`,
      { stationId },
    )
    if (row?.first && row.last) spans.set(stationId, { first: row.first.getTime(), last: row.last.getTime() })
  }
  const stations = [...spans]
  // A record with gaps answers the same window again and again: a few draws for each one wanted are enough.
  for (let draw = 0; draw < 6 * count && found.size < count && stations.length > 0; draw += 1) {
    const [stationId, { first, last }] = stations[draw % stations.length]!
    const after = new Date(first + chance() * (last - first))
    const [row] = await select<StoredEstimate>(
      sequelize,
      `SELECT ${storedColumns} FROM estimates
       WHERE stationId = :stationId AND windowEndsAt >= :after AND ${isFromReadings}
       ORDER BY windowEndsAt, revision LIMIT 1`,
      { stationId, after },
    )
    if (!row) continue
    const estimate = { ...row, inputCommitId: Number(row.inputCommitId) }
    found.set(`${stationId}/${row.windowEndsAt.getTime()}/${row.revision}`, estimate)
  }
  return [...found.values()]
}

/** Newest commit that the operational estimate of a window had seen; null where there is none, or none with readings. */
export async function commitSeenBy(
  { sequelize }: Needs,
  stationId: number,
  windowEndsAt: number,
): Promise<number | null> {
  const [row] = await select<{ inputCommitId: number | null }>(
    sequelize,
    `SELECT inputCommitId FROM estimates WHERE stationId = :stationId AND windowEndsAt = :windowEndsAt AND runId = 0
     ORDER BY revision DESC LIMIT 1`,
    { stationId, windowEndsAt: new Date(windowEndsAt) },
  )
  return row?.inputCommitId == null ? null : Number(row.inputCommitId)
}

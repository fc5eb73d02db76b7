/** What the job asks of a run and writes of it. The operational record is never touched. */
import type { RunChanges } from '../../../shared/schemas/run.ts'
import type { Parts } from '../../config/parts.ts'
import { Estimate, EstimateDetail, Run } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'
import { runSettings } from './read.ts'

export interface RunWork {
  id: number
  stationId: number
  /** Milliseconds since 1970 UTC. */
  startsAt: number
  endsAt: number
  stepSeconds: number
  settingsId: number | null
  changes: RunChanges
  deploymentId: number | null
}

/** Null for a run that is not there. */
export async function readRunWork(runId: number): Promise<RunWork | null> {
  const run = await Run.findByPk(runId)
  if (!run || run.stationId === null || !run.startsAt || !run.endsAt) return null
  const { settingsId, changes, stepSeconds } = runSettings.parse(run.settings)
  const { id, stationId, deploymentId } = run
  const span = { startsAt: run.startsAt.getTime(), endsAt: run.endsAt.getTime() }
  return { id, stationId, ...span, stepSeconds, settingsId, changes, deploymentId }
}

/** End of the newest window that the run has already, ms; null before the first. A stopped run goes on from there. */
export async function lastWindowOf({ sequelize }: Parts, { id, stationId }: RunWork): Promise<number | null> {
  const [row] = await select<{ last: Date | null }>(
    sequelize,
    'SELECT MAX(windowEndsAt) AS last FROM estimates WHERE stationId = :stationId AND runId = :id',
    { stationId, id },
  )
  return row?.last?.getTime() ?? null
}

/** A window is computed once in a run, so its revision is 1. */
export async function saveRunEstimate(
  { sequelize }: Parts,
  runId: number,
  row: Omit<Estimate['_creationAttributes'], 'runId' | 'revision'>,
  detail: Uint8Array,
): Promise<void> {
  await inTransaction(sequelize, async (transaction) => {
    const key = { runId, revision: 1 }
    await Estimate.create({ ...row, ...key }, { transaction })
    const { stationId, windowEndsAt } = row
    await EstimateDetail.create({ stationId, windowEndsAt, ...key, payload: Buffer.from(detail) }, { transaction })
  })
}

export async function endRun(runId: number, status: 'running' | 'done' | 'failed' | 'cancelled'): Promise<void> {
  await Run.update({ status }, { where: { id: runId } })
}

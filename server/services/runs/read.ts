/** Runs as they are shown: their state is that of the job that works them off. */
import { z } from 'zod'
import { runChanges } from '../../../shared/schemas/run.ts'
import type { RunView , runView } from '../../../shared/schemas/run.ts'
import type { Parts } from '../../config/parts.ts'
import { Station } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { notFound } from '../problems.ts'

/** Content of `runs.settings`. */
export const runSettings = z.object({
  settingsId: z.number().int().nullable(),
  changes: runChanges,
  stepSeconds: z.number().int(),
  reason: z.string(),
})

interface RunRow {
  id: number
  label: string
  startsAt: Date
  endsAt: Date
  settings: unknown
  deploymentId: number | null
  status: RunView['status']
  createdAt: Date
  orderedBy: string | null
  jobId: number | null
  progress: number | null
  detail: string | null
}

const runsOfStation = `
  SELECT r.id, r.label, r.startsAt, r.endsAt, r.settings, r.deploymentId, r.createdAt, p.name AS orderedBy,
    j.id AS jobId, COALESCE(j.status, r.status) AS status, j.progress, j.detail
  FROM runs r LEFT JOIN people p ON p.id = r.personId
    LEFT JOIN longJobs j ON j.kind = 'recompute' AND JSON_VALUE(j.parameters, '$.runId') = r.id
  WHERE r.stationId = :stationId AND r.id > 0`

const shownAtMost = 50

export async function listRuns({ sequelize }: Parts, stationId: number): Promise<RunView[]> {
  if (!(await Station.findByPk(stationId))) throw notFound('station', stationId)
  const sql = `${runsOfStation} ORDER BY r.id DESC LIMIT ${shownAtMost}`
  return (await select<RunRow>(sequelize, sql, { stationId })).map(presentRun)
}

export async function readRun({ sequelize }: Parts, stationId: number, runId: number): Promise<RunView> {
  const [row] = await select<RunRow>(sequelize, `${runsOfStation} AND r.id = :runId`, { stationId, runId })
  if (!row) throw notFound('run', runId)
  return presentRun(row)
}

function presentRun({ settings, startsAt, endsAt, createdAt, progress, ...row }: RunRow): RunView {
  const content: unknown = typeof settings === 'string' ? JSON.parse(settings) : settings
  const shown: z.input<typeof runView> = {
    ...row,
    ...runSettings.parse(content),
    startsAt: startsAt.toISOString(),
    endsAt: endsAt.toISOString(),
    createdAt: createdAt.toISOString(),
    progress: progress ?? 0,
  }
  return shown
}

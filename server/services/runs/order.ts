/** Orders a run: its row, the long job that works it off, and the audit are written together. */
import type { RunOrder, RunView } from '../../../shared/schemas/run.ts'
import type { Parts } from '../../config/parts.ts'
import { Deployment, LongJob, Run, Station, StationSettings } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { invalidInput, notFound } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import { readRun } from './read.ts'

export async function orderRun(parts: Parts, stationId: number, order: RunOrder, personId: number): Promise<RunView> {
  const station = await Station.findByPk(stationId)
  if (!station) throw notFound('station', stationId)
  await refuseForeign(stationId, order)
  if (Date.parse(order.endsAt) > parts.clock.now().getTime())
    throw invalidInput([{ path: 'endsAt', message: 'must not lie in the future' }])
  const { label, reason, stepSeconds, settingsId, changes, deploymentId } = order
  const runId = await inTransaction(parts.sequelize, async (transaction) => {
    const now = parts.clock.now()
    const run = await Run.create(
      {
        label,
        stationId,
        startsAt: new Date(order.startsAt),
        endsAt: new Date(order.endsAt),
        settings: { settingsId, changes, stepSeconds, reason },
        deploymentId,
        personId,
        status: 'queued',
        createdAt: now,
      },
      { transaction },
    )
    const title = `Recomputing ${station.shortName}: ${label}`
    const parameters = { runId: run.id }
    const job = { kind: 'recompute', title, parameters, personId, createdAt: now, updatedAt: now }
    await LongJob.create(job, { transaction })
    const change = { personId, action: 'run.order', entity: 'run', entityId: run.id }
    await recordAudit(parts, { ...change, after: { stationId, ...order } }, transaction)
    return run.id
  })
  parts.bus.publish('run.ordered', { runId })
  return readRun(parts, stationId, runId)
}

/** Settings and deployment of another station would give numbers without meaning. */
async function refuseForeign(stationId: number, { settingsId, deploymentId }: RunOrder): Promise<void> {
  const [settings, deployment] = await Promise.all([
    settingsId === null ? null : StationSettings.findOne({ where: { id: settingsId, stationId } }),
    deploymentId === null ? null : Deployment.findOne({ where: { id: deploymentId, stationId } }),
  ])
  if (settingsId !== null && !settings)
    throw invalidInput([{ path: 'settingsId', message: 'is no version of this station’s settings' }])
  if (deploymentId !== null && !deployment)
    throw invalidInput([{ path: 'deploymentId', message: 'is no deployment of this station' }])
}

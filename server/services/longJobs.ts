/** Work that takes long: its progress for people, and a lease, so that a worker that is gone is found out. */
import { Op } from 'sequelize'
import type { LongJobView } from '../../shared/schemas/longJob.ts'
import type { Parts } from '../config/parts.ts'
import { LongJob } from '../models/index.ts'
import { recordAudit } from './audit.ts'
import { notFound, Refused } from './problems.ts'
import { inTransaction } from './transaction.ts'

const leaseMilliseconds = 60_000
const shownMilliseconds = 24 * 3600_000
const longestDetail = 500

type Needs = Pick<Parts, 'clock' | 'bus'>

export interface NewJob {
  kind: string
  /** One sentence for people. */
  title: string
  parameters?: Record<string, unknown>
  personId?: number | null
}

export async function addJob({ clock, bus }: Needs, job: NewJob): Promise<number> {
  const now = clock.now()
  const row = await LongJob.create({
    kind: job.kind,
    title: job.title,
    parameters: job.parameters ?? null,
    personId: job.personId ?? null,
    createdAt: now,
    updatedAt: now,
  })
  bus.publish('job.progressed', presentJob(row))
  return row.id
}

/** Takes the oldest job of this kind that nobody works on: queued, or running with a lease that ran out. */
export async function takeJob(
  { sequelize, clock, bus }: Parts,
  kind: string,
): Promise<{ id: number; parameters: Record<string, unknown> } | null> {
  const now = clock.now()
  const row = await inTransaction(sequelize, async (transaction) => {
    const job = await LongJob.findOne({
      where: { kind, [Op.or]: [{ status: 'queued' }, { status: 'running', leaseUntil: { [Op.lt]: now } }] },
      order: [['id', 'ASC']],
      lock: transaction.LOCK.UPDATE,
      transaction,
    })
    return (
      job?.update(
        { status: 'running', leaseUntil: leaseFrom(now), startedAt: job.startedAt ?? now, updatedAt: now },
        { transaction },
      ) ?? null
    )
  })
  if (!row) return null
  bus.publish('job.progressed', presentJob(row))
  return { id: row.id, parameters: row.parameters ?? {} }
}

/** Renews the lease and says how far the work is (0 to 1). False: somebody cancelled it, so stop. */
export async function reportProgress(
  { clock, bus }: Needs,
  id: number,
  progress: number,
  detail: string | null = null,
): Promise<boolean> {
  const row = await rowOf(id)
  if (row.status !== 'running') return false
  const now = clock.now()
  await row.update({
    progress: Math.min(1, Math.max(0, progress)),
    detail: detail?.slice(0, longestDetail) ?? null,
    leaseUntil: leaseFrom(now),
    updatedAt: now,
  })
  bus.publish('job.progressed', presentJob(row))
  return true
}

export const finishJob = (parts: Needs, id: number, detail: string | null = null): Promise<void> =>
  endJob(parts, id, 'done', detail)

/** `detail` is for people: what failed and what they can do. */
export const failJob = (parts: Needs, id: number, detail: string): Promise<void> => endJob(parts, id, 'failed', detail)

async function endJob({ clock, bus }: Needs, id: number, status: 'done' | 'failed', detail: string | null) {
  const row = await rowOf(id)
  if (row.status !== 'running' && row.status !== 'queued') return
  const now = clock.now()
  await row.update({
    status,
    progress: status === 'done' ? 1 : row.progress,
    detail: detail?.slice(0, longestDetail) ?? null,
    leaseUntil: null,
    finishedAt: now,
    updatedAt: now,
  })
  bus.publish('job.progressed', presentJob(row))
}

export async function cancelJob({ sequelize, clock, bus }: Parts, id: number, personId: number): Promise<LongJobView> {
  const row = await inTransaction(sequelize, async (transaction) => {
    const job = await LongJob.findByPk(id, { lock: true, transaction })
    if (!job) throw notFound('job', id)
    if (job.status === 'cancelled') return job
    if (job.status !== 'queued' && job.status !== 'running') throw alreadyOver()
    const now = clock.now()
    await job.update(
      { status: 'cancelled', cancelRequestedAt: now, leaseUntil: null, finishedAt: now, updatedAt: now },
      { transaction },
    )
    await recordAudit({ clock }, { personId, action: 'job.cancel', entity: 'longJob', entityId: id }, transaction)
    return job
  })
  const view = presentJob(row)
  bus.publish('job.progressed', view)
  return view
}

/** What is under way, and what ended within the last day; newest first. */
export async function listJobs({ clock }: Pick<Parts, 'clock'>): Promise<LongJobView[]> {
  const rows = await LongJob.findAll({
    where: {
      [Op.or]: [
        { status: ['queued', 'running'] },
        { updatedAt: { [Op.gt]: new Date(clock.now().getTime() - shownMilliseconds) } },
      ],
    },
    order: [['id', 'DESC']],
    limit: 100,
  })
  return rows.map(presentJob)
}

export async function readJob(id: number): Promise<LongJobView> {
  return presentJob(await rowOf(id))
}

async function rowOf(id: number): Promise<LongJob> {
  const row = await LongJob.findByPk(id)
  if (!row) throw notFound('job', id)
  return row
}

const leaseFrom = (now: Date): Date => new Date(now.getTime() + leaseMilliseconds)

function presentJob({ id, kind, title, status, progress, detail, startedAt, updatedAt }: LongJob): LongJobView {
  const times = { startedAt: startedAt?.toISOString() ?? null, updatedAt: updatedAt.toISOString() }
  return { id, kind, title, status, progress, detail, ...times }
}

const alreadyOver = (): Refused =>
  new Refused({ status: 409, code: 'job.over', title: 'Already over', detail: 'This work has already ended.' })

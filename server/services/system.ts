/** How the installation is doing: versions, sizes, jobs, mail, disk, backups. Reads only, but for one row a day. */
import { statfs } from 'node:fs/promises'
import { databaseSchema } from './system/database.ts'
import type { BackupOutcome, SystemView } from '../../shared/schemas/system.ts'
import type { Parts } from '../config/parts.ts'
import { softwareVersion } from '../config/softwareVersion.ts'
import { BackupRun } from '../models/index.ts'
import { select } from '../models/sql.ts'
import { readLatestVerification } from './audit/verify.ts'

export async function readSystem(parts: Parts): Promise<SystemView> {
  const now = parts.clock.now()
  const [database, jobs, mail, disk, backups, audit] = await Promise.all([
    databaseSchema(parts),
    jobsOf(parts, now),
    mailOf(parts, now),
    diskOf(parts),
    backupsOf(),
    readLatestVerification(),
  ])
  return {
    at: now.toISOString(),
    software: softwareVersion,
    node: process.version,
    upSeconds: process.uptime(),
    memoryBytes: process.memoryUsage.rss(),
    ...{ database, jobs, mail, disk, backups, audit },
  }
}

interface Mark {
  job: string
  subjectKind: string
  name: string | null
  subjectId: number
  doneUpTo: Date | null
}

async function jobsOf({ sequelize }: Parts, now: Date): Promise<SystemView['jobs']> {
  const marks = await select<Mark>(
    sequelize,
    `SELECT w.job, w.subjectKind, w.subjectId, w.doneUpTo, s.name FROM watermarks w
     LEFT JOIN stations s ON w.subjectKind = 'station' AND s.id = w.subjectId
     WHERE s.id IS NULL OR s.retiredAt IS NULL ORDER BY w.job, w.subjectKind, w.subjectId`,
  )
  return marks.map(({ job, subjectKind, subjectId, name, doneUpTo }) => ({
    job,
    subject: name ?? (Number(subjectId) === 0 ? subjectKind : `${subjectKind} ${subjectId}`),
    doneUpTo: doneUpTo?.toISOString() ?? null,
    behindSeconds: doneUpTo ? Math.max(0, (now.getTime() - doneUpTo.getTime()) / 1000) : null,
  }))
}

async function mailOf({ sequelize, environment }: Parts, now: Date): Promise<SystemView['mail']> {
  const [counts] = await select<{ waiting: number; oldest: Date | null; notOut: number }>(
    sequelize,
    `SELECT CAST(COALESCE(SUM(state IN ('queued', 'leased')), 0) AS UNSIGNED) AS waiting,
            MIN(IF(state IN ('queued', 'leased'), createdAt, NULL)) AS oldest,
            CAST(COALESCE(SUM(state IN ('refused', 'givenUp', 'unknown') AND createdAt > :since), 0) AS UNSIGNED) AS notOut
     FROM deliveries`,
    { since: new Date(now.getTime() - 24 * 3_600_000) },
  )
  const oldest = counts?.oldest ? new Date(counts.oldest).getTime() : null
  return {
    waiting: Number(counts?.waiting ?? 0),
    longestWaitSeconds: oldest === null ? null : Math.max(0, (now.getTime() - oldest) / 1000),
    notOutToday: Number(counts?.notOut ?? 0),
    hasServer: environment.smtpUrl !== null,
  }
}

/** Null where the system does not say. */
async function diskOf({ environment }: Parts): Promise<SystemView['disk']> {
  const found = await statfs(environment.dataFolder).catch(() => null)
  if (!found) return null
  const { bavail, blocks, bsize } = found
  return { folder: environment.dataFolder, freeBytes: bavail * bsize, totalBytes: blocks * bsize }
}

async function backupsOf(): Promise<SystemView['backups']> {
  const newest = (kind: BackupRun['kind'], isGood: boolean) =>
    BackupRun.findOne({ where: { kind, isGood }, order: [['id', 'DESC']] })
  const [last, failed, lastTest, failedTest] = await Promise.all([
    newest('backup', true),
    newest('backup', false),
    newest('restoreTest', true),
    newest('restoreTest', false),
  ])
  const later = (bad: BackupRun | null, good: BackupRun | null) => (bad && bad.id > (good?.id ?? 0) ? bad : null)
  return {
    last: present(last),
    lastTest: present(lastTest),
    failed: present(later(failed, last)),
    failedTest: present(later(failedTest, lastTest)),
  }
}

const present = (run: BackupRun | null): BackupOutcome | null =>
  run && {
    finishedAt: run.finishedAt.toISOString(),
    isGood: Boolean(run.isGood),
    fileName: run.fileName,
    bytes: run.bytes,
    rows: run.rows,
    says: run.says,
  }

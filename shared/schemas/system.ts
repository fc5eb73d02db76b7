/** How the installation itself is doing. Times ISO 8601 UTC, sizes in bytes. */
import { z } from 'zod'
import { auditVerification } from './audit.ts'

const time = z.iso.datetime()

export const backupOutcome = z.object({
  finishedAt: time,
  isGood: z.boolean(),
  fileName: z.string().nullable(),
  bytes: z.number().int().nullable(),
  rows: z.number().int().nullable(),
  says: z.string().nullable(),
})
export type BackupOutcome = z.infer<typeof backupOutcome>

export const systemView = z.object({
  at: time,
  software: z.string(),
  node: z.string(),
  database: z.object({
    version: z.string(),
    bytes: z.number().int(),
    /** Largest first. Rows are MariaDB's own estimate. */
    tables: z.array(z.object({ name: z.string(), bytes: z.number().int(), rows: z.number().int() })),
    /** By day, oldest first; the newest 60 days. */
    sizes: z.array(z.object({ day: z.string(), bytes: z.number().int() })),
  }),
  upSeconds: z.number(),
  memoryBytes: z.number().int(),
  /** How far each job has come with its subject; behind in seconds, null where it counts no time. */
  jobs: z.array(
    z.object({
      job: z.string(),
      subject: z.string(),
      doneUpTo: time.nullable(),
      behindSeconds: z.number().nullable(),
    }),
  ),
  mail: z.object({
    waiting: z.number().int(),
    /** Of the e-mail that has waited longest; null: none waits. */
    longestWaitSeconds: z.number().nullable(),
    notOutToday: z.number().int(),
    hasServer: z.boolean(),
  }),
  disk: z.object({ folder: z.string(), freeBytes: z.number(), totalBytes: z.number() }).nullable(),
  backups: z.object({
    /** Newest that succeeded; null: none ever did. */
    last: backupOutcome.nullable(),
    lastTest: backupOutcome.nullable(),
    /** Newest that failed after the last good one. */
    failed: backupOutcome.nullable(),
    failedTest: backupOutcome.nullable(),
  }),
  audit: auditVerification.nullable(),
})
export type SystemView = z.infer<typeof systemView>

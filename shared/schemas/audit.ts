/** What the audit shows: who changed what and when, and whether its chain holds. Times ISO 8601 UTC. */
import { z } from 'zod'
import { personName } from './limit.ts'

const time = z.iso.datetime()

export const auditView = z.object({
  id: z.number().int(),
  at: time,
  /** Null: the program itself. */
  person: personName.nullable(),
  action: z.string(),
  entity: z.string(),
  entityId: z.string(),
  before: z.unknown(),
  after: z.unknown(),
  /** Null: not sealed yet; that comes within ten seconds. */
  sealNumber: z.number().int().nullable(),
})
export type AuditView = z.infer<typeof auditView>
export const auditPage = z.object({
  audits: z.array(auditView),
  next: z.number().int().nullable(),
  total: z.number().int(),
})
export type AuditPage = z.infer<typeof auditPage>

/** `person` 0: the program itself. Spans include their first moment and exclude their last. */
export interface AuditFilter {
  personId: number | null
  entity: string | null
  action: string | null
  from: Date | null
  to: Date | null
}

/** What can be filtered by: only what occurs. */
export const auditChoices = z.object({
  people: z.array(personName),
  entities: z.array(z.string()),
  actions: z.array(z.string()),
})
export type AuditChoices = z.infer<typeof auditChoices>

/**
 * `altered`: a sealed row is not what was sealed. `missing`: a seal's row is gone. `tailMissing`: rows that a kept anchor
 * names are gone from the end. `anchorDiffers`: the row of an anchor bears another seal: the chain was made anew.
 * `anchorForged`: a line of the anchors' file was not written by this installation. `anchorsGone`: the file is missing or
 * empty though rows were sealed. `unsealed`: rows have waited too long for a seal.
 */
export const auditFault = z.enum([
  'altered',
  'missing',
  'tailMissing',
  'anchorDiffers',
  'anchorForged',
  'anchorsGone',
  'unsealed',
])
export type AuditFault = z.infer<typeof auditFault>

export const auditVerification = z.object({
  at: time,
  /** Null: by itself at night, or by the command. */
  person: personName.nullable(),
  isWhole: z.boolean(),
  sealedRows: z.number().int(),
  waitingRows: z.number().int(),
  newestSeal: z.number().int(),
  /** Hexadecimal, of the newest seal. */
  newestHash: z.string(),
  anchors: z.number().int(),
  newestAnchor: z.object({ at: time, sealNumber: z.number().int() }).nullable(),
  faults: z.array(z.object({ kind: auditFault, sealNumber: z.number().int().nullable(), says: z.string() })),
})
export type AuditVerification = z.infer<typeof auditVerification>
export const latestVerification = z.object({ verification: auditVerification.nullable() })

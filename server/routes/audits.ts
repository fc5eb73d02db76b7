import { z } from 'zod'
import { auditChoices, auditPage, auditVerification, latestVerification } from '../../shared/schemas/audit.ts'
import type { AuditFilter } from '../../shared/schemas/audit.ts'
import type { Parts } from '../config/parts.ts'
import { listAudits, readAuditChoices, writeAuditFile } from '../services/audit/read.ts'
import { readLatestVerification, verifyAudit } from '../services/audit/verify.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const moment = z.iso.datetime().transform((text) => new Date(text))
const filter = z.object({
  /** 0: the program itself. */
  personId: z.union([z.literal('0').transform(() => 0), idInPath]).optional(),
  entity: z.string().min(1).max(40).optional(),
  action: z.string().min(1).max(60).optional(),
  from: moment.optional(),
  to: moment.optional(),
})

const filterOf = ({ personId, entity, action, from, to }: z.output<typeof filter>): AuditFilter => ({
  personId: personId ?? null,
  entity: entity ?? null,
  action: action ?? null,
  from: from ?? null,
  to: to ?? null,
})

export const auditRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/audits',
    action: 'audits.read',
    summary: 'Who changed what and when, newest first; 0 as person is the program itself',
    query: filter.extend({ before: idInPath.optional() }),
    answer: auditPage,
    handle: ({ query }) => listAudits(filterOf(query), query.before ?? null),
  }),
  route({
    method: 'get',
    path: '/api/audits/choices',
    action: 'audits.read',
    summary: 'People, things and actions that occur in the audit',
    answer: auditChoices,
    handle: () => readAuditChoices(parts),
  }),
  route({
    method: 'get',
    path: '/api/audits/file',
    action: 'audits.read',
    summary: 'The same as a CSV file, a line each changed field, at most 50,000 rows',
    query: filter,
    answer: z.string(),
    media: 'text/csv',
    deadlineMilliseconds: 25_000,
    handle: async ({ query, response }) => {
      response.set('Content-Disposition', 'attachment; filename="audit.csv"')
      return writeAuditFile(filterOf(query))
    },
  }),
  route({
    method: 'get',
    path: '/api/audits/verification',
    action: 'audits.read',
    summary: 'What the newest look over the whole chain found',
    answer: latestVerification,
    handle: async () => ({ verification: await readLatestVerification() }),
  }),
  route({
    method: 'post',
    path: '/api/audits/verification',
    action: 'audits.confirm',
    summary: 'Walks the whole chain now, and holds it against the anchors kept outside the database',
    answer: auditVerification,
    deadlineMilliseconds: 25_000,
    handle: ({ caller }) => verifyAudit(parts, caller.person.id),
  }),
]
